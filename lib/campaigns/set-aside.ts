import { audit } from "@/lib/audit/record";
import { hasEnded, lockedFor } from "@/lib/campaigns/locked-for";
import { openHold } from "@/lib/campaigns/open-hold";
import { change, inTransaction } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";

type SetAside = { by: Actor; campaignId: string; why: string; now: Date };

/** Takes a campaign off its rig without ending it: the cell is parked, then the rig is free for the next in line. */
export function setCampaignAside({ by, campaignId, why, now }: SetAside) {
  return inTransaction(async (transaction) => {
    const campaign = await lockedFor(transaction, { by, permission: "set campaigns aside", campaignId, now });
    if (campaign.setAside) return { id: campaignId, state: "held" as const };
    if (hasEnded(campaign)) throw conflict(`The campaign has ${campaign.state} already`);
    if (campaign.state === "draft" || campaign.state === "queued") throw conflict("Only a campaign that has started can be set aside");
    await openHold(transaction, { campaignId, reason: "setAside", text: why, by, now });
    await change(
      `update campaign set parking = case parking when 'running' then 'running' else 'wanted' end, needs_advance = true where id = $1`,
      [campaignId],
      transaction,
    );
    await audit(transaction, { by, now, action: "set aside", entity: "campaign", entityId: campaignId, detail: { why } });
    await notify(`campaign:${campaignId}`, transaction);
    return { id: campaignId, state: "held" as const };
  });
}
