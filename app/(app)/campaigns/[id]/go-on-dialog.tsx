"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { Option, OptionGroup } from "@/components/ui/field";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignCode } from "@/lib/campaigns/code";
import { formatCount } from "@/lib/format";
import { possible } from "./possible";
import { useVerb } from "./use-verb";

const PLACES = ["here", "phase", "cycle"] as const;
type From = (typeof PLACES)[number];

/** Go on here, from this phase or from this cycle: each with what it means. */
export function GoOnDialog({ campaign, onClose }: { campaign: CampaignAnswer; onClose: () => void }) {
  const { from } = possible(campaign);
  const [chosen, setChosen] = useState<From>(from.here === null ? "here" : "phase");
  const verb = useVerb({ path: `/api/campaigns/${campaign.id}/resume`, done: `${campaignCode(campaign.id)} goes on.`, onDone: onClose });
  const words = wordsOf(campaign);
  return (
    <Dialog open onOpenChange={(open) => !open && onClose()} title={`Go on with ${campaignCode(campaign.id)}`} description="What was measured stays in any case.">
      <div className="mt-3">
        <OptionGroup legend="From where" error={verb.error?.message}>
          {PLACES.map((place) => (
            <Option key={place} type="radio" name="from" value={place} checked={chosen === place} disabled={from[place] !== null} onChange={() => setChosen(place)}>
              <b>{words[place].name}</b>
              <span className="small block text-ink2">{from[place] ?? words[place].means}</span>
            </Option>
          ))}
        </OptionGroup>
      </div>
      <div className="buttons">
        <Button look="primary" busy={verb.isPending} notPossible={from[chosen]} onClick={() => verb.mutate({ from: chosen })}>Go on</Button>
        <Button look="link" onClick={onClose}>Leave it held</Button>
      </div>
    </Dialog>
  );
}

function wordsOf({ step, cycle, parking }: CampaignAnswer): Record<From, { name: string; means: string }> {
  const stored = step?.kind === "measure" ? step.stored : 0;
  return {
    here: { name: "Here", means: step?.repeats && stored < step.repeats ? `Goes on with repeat ${formatCount(stored + 1)} of ${formatCount(step.repeats)}.` : "Goes on with the next step." },
    phase: !step || step.kind === "measure" ? phaseWords(stored) : stepWords(step, parking),
    cycle: { name: "This cycle", means: cycle > 0 ? `Begins cycle ${formatCount(cycle)} again, with its reference.` : "Begins the cycle again." },
  };
}

const phaseWords = (stored: number) => ({
  name: "This phase",
  means: `Measures the phase again from its beginning${stored > 0 ? `; its ${formatCount(stored)} repeats stay beside` : ""}.`,
});

const stepWords = ({ label, state }: NonNullable<CampaignAnswer["step"]>, parking: CampaignAnswer["parking"]) => ({
  name: "This step",
  means: state === "done" && parking === "none" ? `“${label}” is done: goes on with the next step.` : `Makes “${label}” again, with the cell as it needs it.`,
});
