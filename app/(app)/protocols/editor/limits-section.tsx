"use client";

import { useMemo } from "react";
import { Button } from "@/components/ui/button";
import { classNames } from "@/components/ui/class-names";
import { Menu, MenuItem } from "@/components/ui/menu";
import { Section } from "@/components/ui/page";
import { limitParts } from "@/lib/protocol/limit-sentence";
import type { DraftLimit } from "@/lib/protocols/draft";
import { errorsOf } from "@/lib/protocols/draft-errors";
import { LIMIT_WORDS, type LimitKind, newLimit } from "@/lib/protocols/new-block";
import { FieldContext, type FieldSource, useEditor } from "./editor-context";
import { LimitFields } from "./limit-fields";
import { makeId } from "./make-id";
import { Mistakes, OpenSentence } from "./open-sentence";
import { SelectInput } from "./typed-fields";
import { useFocusField } from "./use-focus-field";

const KINDS = Object.keys(LIMIT_WORDS) as LimitKind[];

/** What Longreed watches, and what it does. */
export function LimitsSection({ slots }: { slots: readonly string[] }) {
  const { draft, edit, setOpen } = useEditor();
  const add = (kind: LimitKind) => {
    const limit = newLimit(kind, makeId);
    edit({ do: "add limit", limit });
    setOpen({ id: limit.id });
  };
  return (
    <Section head="Limits" note="What Longreed watches, and what it does.">
      <ul className="facts">{draft.limits.map((limit) => <LimitRow key={limit.id} limit={limit} slots={slots} />)}</ul>
      <div className="buttons mt-2">
        <Menu label="Limits to add" trigger={<Button small>Add limit</Button>}>
          {KINDS.map((kind) => <MenuItem key={kind} onSelect={() => add(kind)}>{LIMIT_WORDS[kind]}</MenuItem>)}
        </Menu>
      </div>
    </Section>
  );
}

function LimitRow({ limit, slots }: { limit: DraftLimit; slots: readonly string[] }) {
  const { edit, errors: all, open, setOpen } = useEditor();
  const isOpen = open?.id === limit.id;
  const errors = errorsOf(all, limit.id);
  const sheet = useFocusField(isOpen, open?.field);
  const source = useMemo<FieldSource>(
    () => ({ values: limit, errors, slots, set: (path, value) => edit({ do: "set in limit", id: limit.id, path, value }) }),
    [limit, errors, slots, edit],
  );
  return (
    <li className={classNames(isOpen && "being-edited")}>
      <OpenSentence id={limit.id} parts={limitParts(limit)} errors={errors} />
      {!isOpen && <Mistakes errors={errors} />}
      {isOpen && (
        <FieldContext value={source}>
          <div className="sheet-fields" ref={sheet}>
            <SelectInput
              path="kind"
              label="Watches for"
              options={KINDS.map((kind) => ({ value: kind, label: LIMIT_WORDS[kind] }))}
              write={(kind) => edit({ do: "replace limit", limit: newLimit(kind as LimitKind, makeId, limit) })}
            />
            <LimitFields key={limit.kind} kind={limit.kind} />
            <div className="buttons whole">
              <Button small look="primary" onClick={() => setOpen(null)}>Done</Button>
              <Button small onClick={() => edit({ do: "remove limit", id: limit.id })}>Remove</Button>
            </div>
          </div>
        </FieldContext>
      )}
    </li>
  );
}
