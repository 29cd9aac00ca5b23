"use client";

import { useState } from "react";
import { Button } from "@/components/ui/button";
import { Dialog } from "@/components/ui/dialog";
import { Option, OptionGroup } from "@/components/ui/field";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignCode } from "@/lib/campaigns/code";
import { PLACES, wordsOf, type From } from "./go-on-words";
import { possible } from "./possible";
import { useVerb } from "./use-verb";

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
