import type { Transaction } from "sequelize";
import { carryOutBreach } from "@/lib/alarms/carry-out-breach";
import { returnAlarm } from "@/lib/alarms/return-alarm";
import { lockCampaign } from "@/lib/campaigns/campaign-row";
import { change, row, rows } from "@/lib/db";

type Failed = { step: { id: string; campaignId: string; label: string; cycle: number; sequence: number }; now: Date };

/** An attempt has failed: `count` limits look at how many have in a row, over all steps since one was last done. */
export async function countFailure(transaction: Transaction, { step, now }: Failed): Promise<void> {
  await change(`update step set failed_attempts = failed_attempts + 1 where id = $1`, [step.id], transaction);
  const campaign = await lockCampaign(transaction, { campaignId: step.campaignId, now });
  const limits = campaign?.definition.limits.filter((limit) => limit.kind === "count") ?? [];
  if (!campaign || limits.length === 0 || (campaign.state !== "running" && campaign.state !== "held")) return;

  const failed = await failedInARow(transaction, step.campaignId);
  const { cycle, sequence, id: stepId } = step;
  for (const limit of limits) {
    if (failed < limit.failedSteps) continue;
    const text = `${failed} ${failed === 1 ? "attempt" : "attempts in a row"} failed, the last at "${step.label}", limit ${limit.failedSteps}`;
    await carryOutBreach(transaction, { campaign, limit, found: { value: failed, limit: limit.failedSteps, unit: "attempts", text }, at: { cycle, sequence, stepId }, now });
  }
}

async function failedInARow(transaction: Transaction, campaignId: string): Promise<number> {
  const found = await row<{ failed: number }>(
    `select coalesce(sum(failed_attempts), 0)::int as failed from step
      where campaign_id = $1 and sequence > coalesce((select max(sequence) from step where campaign_id = $1 and state = 'done' and kind not in ('wait', 'ask')), -1)`,
    [campaignId],
    transaction,
  );
  return found?.failed ?? 0;
}

/** A step was done: the row of failed attempts has ended. */
export async function failuresAreOver(transaction: Transaction, { campaignId, now }: { campaignId: string; now: Date }): Promise<void> {
  const open = await rows<{ limitId: string }>(
    `select limit_id as "limitId" from alarm where campaign_id = $1 and kind = 'count' and source = 'limit' and state in ('unacknowledged', 'acknowledged')`,
    [campaignId],
    transaction,
  );
  for (const { limitId } of open) await returnAlarm(transaction, { campaignId, limitId, now, text: "A step was done again" });
}
