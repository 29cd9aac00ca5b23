"use client";

import { useMutation, useQueryClient } from "@tanstack/react-query";
import { useState, type FormEvent } from "react";
import { toast } from "sonner";
import { Button } from "@/components/ui/button";
import { Option, OptionGroup, TextField } from "@/components/ui/field";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import type { FitRunAnswer } from "@/lib/fit-runs/schema";
import { fetchJson } from "@/lib/http/fetch-json";

const READOUTS = [
  { value: undefined, label: "As the protocol says" },
  { value: "velocity", label: "Velocity, e.g. an induced voltage" },
  { value: "displacement", label: "Displacement, e.g. optical or capacitive" },
] as const;

/** Has the campaign fitted again with other settings. */
export function FitAgain({ campaign, runs }: { campaign: CampaignAnswer; runs: readonly FitRunAnswer[] }) {
  const [offsetSlope, setOffsetSlope] = useState(true);
  const [readout, setReadout] = useState<(typeof READOUTS)[number]["value"]>();
  const [why, setWhy] = useState("");
  const queries = useQueryClient();
  const start = useMutation({
    mutationFn: () => fetchJson(`/api/campaigns/${campaign.id}/fit-runs`, { method: "POST", body: { offsetSlope, ...(readout && { readout }), why: why.trim() } }),
    onSuccess: async () => {
      setWhy("");
      toast("The campaign is being fitted again.");
      await queries.invalidateQueries({ queryKey: ["campaigns", "fit-runs", campaign.id] });
    },
  });
  const waiting = runs.some(({ state }) => state === "waiting");
  const submit = (event: FormEvent) => {
    event.preventDefault();
    if (why.trim() && !waiting) start.mutate();
  };
  return (
    <form onSubmit={submit}>
      <div className="two">
        <OptionGroup legend="Offset">
          <Option type="radio" name="slope" checked={offsetSlope} onChange={() => setOffsetSlope(true)} note="as at first">With a slope over the sweep</Option>
          <Option type="radio" name="slope" checked={!offsetSlope} onChange={() => setOffsetSlope(false)}>Level</Option>
        </OptionGroup>
        <OptionGroup legend="Readout">
          {READOUTS.map(({ value, label }) => <Option key={label} type="radio" name="readout" checked={readout === value} onChange={() => setReadout(value)}>{label}</Option>)}
        </OptionGroup>
      </div>
      <TextField className="mt-4 max-w-[44em]" label="Why" hint="It goes into the log" maxLength={2000} value={why} onChange={(event) => setWhy(event.target.value)} error={start.error?.message} />
      <div className="buttons mt-3">
        <Button type="submit" look="primary" busy={start.isPending} notPossible={waiting ? "a run is being made already" : why.trim() ? null : "say why first"}>Fit again</Button>
      </div>
    </form>
  );
}
