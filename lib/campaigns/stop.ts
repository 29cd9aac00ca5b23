import { endCampaign } from "@/lib/campaigns/end";
import { hasEnded, lockedFor } from "@/lib/campaigns/locked-for";
import { inTransaction } from "@/lib/db";
import { conflict } from "@/lib/errors";
import type { Actor } from "@/lib/people/actor";

type StopCampaign = { by: Actor; campaignId: string; why: string; now: Date };

/** A person ends a campaign for good. Park steps still make the cell safe. Stopping a stopped campaign changes nothing. */
export function stopCampaign({ by, campaignId, why, now }: StopCampaign) {
  return inTransaction(async (transaction) => {
    const campaign = await lockedFor(transaction, { by, permission: "stop campaigns", campaignId, now });
    if (campaign.state === "stopped") return { id: campaignId, state: "stopped" as const };
    if (hasEnded(campaign)) throw conflict(`The campaign has ${campaign.state} already`);
    if (campaign.state === "draft") throw conflict("A draft has not started; delete it instead");
    await endCampaign(transaction, { campaign, state: "stopped", text: why, by, now });
    return { id: campaignId, state: "stopped" as const };
  });
}
