"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useState, type ReactNode } from "react";
import { toast } from "sonner";
import { Button } from "@/components/ui/button";
import { Option, OptionGroup, TextAreaField } from "@/components/ui/field";
import { Section } from "@/components/ui/page";
import { formatCount, formatUncertain } from "@/lib/format";
import { fetchJson } from "@/lib/http/fetch-json";
import type { SweepAnswer, SweepPlace } from "@/lib/readings/schema";

const REASONS = ["A bubble or foreign body in the cell", "The rig was touched or moved", "The liquid was not yet settled"] as const;
const OTHER = "Another reason, said below";

type LeaveOutProps = { campaignId: string; sweep: SweepAnswer; place: SweepPlace };

/** Leaves a repeat out of its phase value with a reason, or takes it back in; what the value becomes is said before. */
export function LeaveOut({ campaignId, sweep, place }: LeaveOutProps) {
  const { excluded } = place;
  const [reason, setReason] = useState<string>(excluded ? OTHER : REASONS[0]);
  const [note, setNote] = useState("");
  const queries = useQueryClient();
  const repeat = `repeat ${formatCount(sweep.index + 1)}`;
  const act = useMutation({
    mutationFn: (why: string) =>
      excluded
        ? fetchJson(`/api/exclusions/${excluded.id}/take-back`, { method: "POST", body: { why } })
        : fetchJson(`/api/campaigns/${campaignId}/exclusions`, { method: "POST", body: { phaseId: place.phaseId, indices: [sweep.index], why } }),
    onSuccess: async () => {
      toast(excluded ? `Took ${repeat} back in.` : `Left out ${repeat}.`);
      setNote("");
      await queries.invalidateQueries({ queryKey: ["campaigns"] });
    },
  });
  const said = note.trim();
  const why = excluded || reason === OTHER ? said : [reason, said].filter(Boolean).join(": ");
  const button = (
    <Button look="primary" busy={act.isPending} notPossible={why ? null : "say why first"} onClick={() => act.mutate(why)}>
      {excluded ? `Take ${repeat} back in` : `Leave out ${repeat}`}
    </Button>
  );
  return (
    <Section head={excluded ? "Left out" : "Leave it out"} note="A record, not a deletion: the reading stays, with who, when and why. It can be taken back.">
      <div className="two">
        {excluded ? (
          <p>Left out by {excluded.by}: {excluded.why}</p>
        ) : (
          <OptionGroup legend="Why">
            {[...REASONS, OTHER].map((one) => <Option key={one} type="radio" name="why" checked={reason === one} onChange={() => setReason(one)}>{one}</Option>)}
          </OptionGroup>
        )}
        <div>
          <TextAreaField label={excluded ? "Why it counts after all" : "Note"} rows={3} maxLength={1900} value={note} onChange={(event) => setNote(event.target.value)} error={act.error?.message} />
          <p className="small mt-2 text-ink2"><Becomes place={place} /> Decisions already made stay as they are.</p>
          <div className="buttons mt-3">{button}</div>
        </div>
      </div>
    </Section>
  );
}

function Becomes({ place: { f0, otherwise } }: { place: SweepPlace }): ReactNode {
  const hz = (value: SweepPlace["f0"]) => (value ? <b className="num">{formatUncertain(value.mean, value.u)}&nbsp;Hz</b> : <>no value</>);
  if (f0 && otherwise.f0 && f0.mean === otherwise.f0.mean) return <>The phase value stays {hz(f0)}: this repeat does not count anyway.</>;
  return <>The phase value would go from {hz(f0)} to {hz(otherwise.f0)}.</>;
}
