import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { openHold } from "@/lib/campaigns/open-hold";
import { openStep, skipStep } from "@/lib/campaigns/steps-of-campaign";
import { change, row } from "@/lib/db";
import { redirect } from "@/lib/protocol/interpreter";
import { openTask } from "@/lib/tasks/open-task";

/**
 * A running campaign needs its sensor on its rig. Missing: it holds on a mount task. Mounted anew: the baseline begins again
 * with a reference at the present set-point. Returns whether anything changed.
 */
export async function checkMount(transaction: Transaction, { campaign, now }: { campaign: CampaignRow; now: Date }): Promise<boolean> {
  const mount = await row<{ id: string }>(
    `select id from mount where sensor_id = $1 and rig_id = $2 and upper_inf(period) and lower(period) <= greatest($3::timestamptz, $4::timestamptz)`,
    [campaign.sensorId, campaign.rigId, now, campaign.clock],
    transaction,
  );
  if (mount?.id === campaign.mountId && mount) return false;
  const open = await openStep(transaction, campaign.id);
  if (open?.state === "out") return false;
  if (!mount) {
    await askForMount(transaction, campaign, now);
    return true;
  }
  const first = campaign.mountId === null || !campaign.cursor;
  if (open && !first) await skipStep(transaction, { stepId: open.id, now });
  const cursor = first || !campaign.cursor ? campaign.cursor : redirect(campaign.definition, campaign.cursor, { kind: "reference", from: "phase" });
  await change(
    `update campaign set mount_id = $2, cursor = coalesce($3, cursor) where id = $1`,
    [campaign.id, mount.id, cursor && !("impossible" in cursor) ? JSON.stringify(cursor) : null],
    transaction,
  );
  return true;
}

async function askForMount(transaction: Transaction, campaign: CampaignRow, now: Date) {
  const instruction = `Mount ${campaign.serial} on ${campaign.rigName}`;
  const holdId = await openHold(transaction, { campaignId: campaign.id, reason: "task", text: instruction, by: "longreed", now });
  await openTask(transaction, { rigId: campaign.rigId, campaignId: campaign.id, holdId, kind: "mount", urgency: "high", instruction, now });
}
