import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { openHold } from "@/lib/campaigns/open-hold";
import { openStep, skipStep } from "@/lib/campaigns/steps-of-campaign";
import { change } from "@/lib/db";
import { redirect } from "@/lib/protocol/interpreter";
import { openTask } from "@/lib/tasks/open-task";

/**
 * A running campaign needs its sensor on its rig. Missing: it holds on a mount task. Mounted anew: the baseline begins again
 * with a reference at the present set-point. Returns whether anything changed.
 */
export async function checkMount(transaction: Transaction, { campaign, now }: { campaign: CampaignRow; now: Date }): Promise<boolean> {
  const { mountId, presentMountId } = campaign;
  if (presentMountId !== null && presentMountId === mountId) return false;
  const open = await openStep(transaction, campaign.id);
  if (open?.state === "out") return false;
  if (presentMountId === null) {
    await askForMount(transaction, campaign, now);
    return true;
  }
  const first = mountId === null || !campaign.cursor;
  if (open && !first) await skipStep(transaction, { stepId: open.id, now });
  const cursor = first || !campaign.cursor ? campaign.cursor : redirect(campaign.definition, campaign.cursor, { kind: "reference", from: "phase" });
  await change(
    `update campaign set mount_id = $2, cursor = coalesce($3, cursor) where id = $1`,
    [campaign.id, presentMountId, cursor && !("impossible" in cursor) ? JSON.stringify(cursor) : null],
    transaction,
  );
  return true;
}

async function askForMount(transaction: Transaction, campaign: CampaignRow, now: Date) {
  const instruction = `Mount ${campaign.serial} on ${campaign.rigName}`;
  const holdId = await openHold(transaction, { campaignId: campaign.id, reason: "task", text: instruction, by: "longreed", now });
  await openTask(transaction, { rigId: campaign.rigId, campaignId: campaign.id, holdId, kind: "mount", urgency: "high", instruction, now });
}
