import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import type { StepState } from "@/lib/campaigns/steps-of-campaign";
import { change } from "@/lib/db";

const LEAVES_CELL = new Set(["measure", "settle", "wait", "ask"]);

/**
 * Whether a held campaign has air in its cell and a step in hand, or failed, that puts nothing there: then its park is over
 * before it has begun, and the step waits with what it has. Not so for a campaign that leaves its rig or has ended.
 */
export async function nothingToPark(transaction: Transaction, campaign: CampaignRow, inHand: StepState): Promise<boolean> {
  if (campaign.parking !== "wanted" || campaign.cursor?.cell.content !== "air" || !LEAVES_CELL.has(inHand.kind)) return false;
  const parked = await change(
    `update campaign set parking = 'parked' where id = $1 and state = 'held'
       and not exists (select 1 from hold where campaign_id = $1 and reason = 'setAside' and released_at is null)`,
    [campaign.id],
    transaction,
  );
  return parked > 0;
}
