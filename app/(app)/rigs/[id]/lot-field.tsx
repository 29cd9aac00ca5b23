"use client";

import { useQuery } from "@tanstack/react-query";
import { useEffect, useId, useRef, useState } from "react";
import { Field } from "@/components/ui/field";
import { ScanButton } from "@/components/ui/scan-button";
import { useLater } from "@/components/ui/use-later";
import { lotsOptions } from "@/lib/liquids/client";
import type { LotAnswer } from "@/lib/liquids/schema";
import type { PortAnswer } from "@/lib/rigs/schema";
import { lotOf, saidOfLot } from "./lot-words";

type LotFieldProps = {
  /** The newest; older ones are looked for as one types. */
  lots: readonly LotAnswer[];
  bottle: PortAnswer["bottle"];
  timeZone: string;
  error?: string;
  /** The lot's id, or nothing while no lot has the typed code. */
  onChange: (lotId: string) => void;
};

/** The code on the bottle, typed, chosen or scanned, answered at once with what it is. */
export function LotField({ lots: newest, bottle, timeZone, error, onChange }: LotFieldProps) {
  const [code, setCode] = useState(bottle?.lotCode ?? "");
  const listId = useId();
  const asked = useLater(code.trim(), 200);
  const { data: searched } = useQuery({ ...lotsOptions(asked), enabled: asked !== "" && lotOf(asked, newest) === undefined });
  const lots = [...newest, ...(searched?.items.filter(({ id }) => newest.every((lot) => lot.id !== id)) ?? [])];
  const known = lotOf(code, lots)?.id ?? "";
  const told = useRef(onChange);
  useEffect(() => {
    told.current = onChange;
  });
  useEffect(() => told.current(known), [known]);
  return (
    <Field label="Lot on the bottle" error={error} hint={saidOfLot({ code, lots, bottle, timeZone })}>
      {(bound) => (
        <div className="flex gap-2">
          <input {...bound} className="control" type="text" list={listId} autoCapitalize="characters" autoComplete="off" spellCheck={false} value={code} onChange={(event) => setCode(event.target.value)} />
          <datalist id={listId}>{lots.map(({ id, code: known, liquidName }) => <option key={id} value={known}>{liquidName}</option>)}</datalist>
          <ScanButton onRead={setCode} />
        </div>
      )}
    </Field>
  );
}
