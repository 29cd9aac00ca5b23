"use client";

import { useMemo } from "react";
import { Option } from "@/components/ui/field";
import { Section } from "@/components/ui/page";
import { errorsOf } from "@/lib/protocols/draft-errors";
import { FieldContext, type FieldSource, useEditor } from "./editor-context";
import { DurationInput, NumberInput, SelectInput, TextInput } from "./typed-fields";

/** What holds for the protocol as a whole. */
export function ProtocolFields({ slots }: { slots: readonly string[] }) {
  const { draft, errors: all, edit } = useEditor();
  const errors = errorsOf(all, "");
  const source = useMemo<FieldSource>(() => ({ values: draft, errors, slots, set: (path, value) => edit({ do: "set", path, value }) }), [draft, errors, slots, edit]);
  const hasSearch = draft.search !== undefined;
  return (
    <FieldContext value={source}>
      <Section head="Protocol">
        <div className="sheet-fields plain">
          <TextInput keepsEmpty path="name" label="Name" className="wide" />
          <SelectInput path="readout" label="The sensor is read as" options={[{ value: "velocity", label: "velocity" }, { value: "displacement", label: "displacement" }]} />
          <NumberInput path="baseline.airReferences" label="Air references of the baseline" hint="1 to 20, else 3" />
          <NumberInput path="maxAttempts" label="Attempts at a step" hint="1 to 100, else 3" />
          <DurationInput path="parkAfterS" label="Park after a hold of" hint="else only on stop" />
        </div>
        <div className="mt-3 max-w-[32em]">
          <Option type="checkbox" checked={hasSearch} onChange={(event) => edit({ do: "set", path: "search", value: event.target.checked ? { fromHz: 500, toHz: 5000, points: 401 } : undefined })}>
            Search the resonance in a range of its own
          </Option>
        </div>
        {hasSearch && (
          <div className="sheet-fields plain">
            <NumberInput path="search.fromHz" label="From" hint="Hz" />
            <NumberInput path="search.toHz" label="To" hint="Hz" />
            <NumberInput path="search.points" label="Points" hint="11 to 4001" />
          </div>
        )}
      </Section>
    </FieldContext>
  );
}
