"use client";

import { useId, useState } from "react";
import { Field } from "@/components/ui/field";
import { ScanButton } from "@/components/ui/scan-button";
import type { LotAnswer } from "@/lib/liquids/schema";
import type { PortAnswer } from "@/lib/rigs/schema";
import { lotOf, saidOfLot } from "./lot-words";

type LotFieldProps = {
  lots: readonly LotAnswer[];
  bottle: PortAnswer["bottle"];
  timeZone: string;
  error?: string;
  /** The lot's id, or nothing while no lot has the typed code. */
  onChange: (lotId: string) => void;
};

/** The code on the bottle, typed, chosen or scanned, answered at once with what it is. */
export function LotField({ lots, bottle, timeZone, error, onChange }: LotFieldProps) {
  const [code, setCode] = useState(bottle?.lotCode ?? "");
  const listId = useId();
  const take = (typed: string) => {
    setCode(typed);
    onChange(lotOf(typed, lots)?.id ?? "");
  };
  return (
    <Field label="Lot on the bottle" error={error} hint={saidOfLot({ code, lots, bottle, timeZone })}>
      {(bound) => (
        <div className="flex gap-2">
          <input {...bound} className="control" type="text" list={listId} autoCapitalize="characters" autoComplete="off" spellCheck={false} value={code} onChange={(event) => take(event.target.value)} />
          <datalist id={listId}>{lots.map(({ id, code: known, liquidName }) => <option key={id} value={known}>{liquidName}</option>)}</datalist>
          <ScanButton onRead={take} />
        </div>
      )}
    </Field>
  );
}
