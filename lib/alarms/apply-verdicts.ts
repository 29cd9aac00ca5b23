import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { returnAlarm } from "@/lib/alarms/return-alarm";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { endCampaign } from "@/lib/campaigns/end";
import { openHold } from "@/lib/campaigns/open-hold";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, row } from "@/lib/db";
import type { Verdict } from "@/lib/limits/verdict";
import type { ClosedPhase } from "@/lib/phases/close-phase";
import { redirect } from "@/lib/protocol/interpreter";
import type { Limit } from "@/lib/protocol/schema";

type Apply = { campaign: CampaignRow; phase: ClosedPhase; stepId: string; verdicts: readonly Verdict[]; now: Date };

/** Does what the limits say: opens or returns alarms, holds, cleans again, stops. */
export async function applyVerdicts(transaction: Transaction, { campaign, phase, stepId, verdicts, now }: Apply): Promise<void> {
  for (const verdict of verdicts) {
    const limit = campaign.definition.limits.find(({ id }) => id === verdict.limitId) as Limit;
    if (verdict.state === "breach") await breach(transaction, { campaign, phase, stepId, limit, verdict, now });
    if (verdict.state === "inside") await returnAlarm(transaction, { campaignId: campaign.id, limitId: limit.id, now, text: `Back within the limit: ${verdict.text}` });
  }
}

type Breach = { campaign: CampaignRow; phase: ClosedPhase; stepId: string; limit: Limit; verdict: Verdict; now: Date };

async function breach(transaction: Transaction, { campaign, phase, stepId, limit, verdict, now }: Breach): Promise<void> {
  if (await isDead(transaction, campaign, limit)) return;
  if (limit.does.every((what) => what === "note")) {
    await recordEvent(transaction, { campaignId: campaign.id, now, kind: "limit", who: "Longreed", text: verdict.text, sequence: phase.sequence });
    return;
  }
  const actions: string[] = [];
  if (limit.does.includes("stop")) actions.push("The campaign was stopped.");
  else if (limit.does.includes("hold")) actions.push("The campaign holds.");
  else if (limit.does.includes("cleanAgain")) actions.push("The cell is cleaned again, then the reference is measured once more.");
  else actions.push("Measuring goes on.");

  const { opened } = await openAlarm(transaction, {
    now,
    clock: campaign.clock,
    rigId: campaign.rigId,
    campaignId: campaign.id,
    sensorId: campaign.sensorId,
    source: "limit",
    limitId: limit.id,
    kind: limit.kind,
    phaseId: phase.phaseId,
    stepId,
    fitRunId: phase.fitRunId,
    value: verdict.value,
    limitValue: verdict.limit,
    unit: verdict.unit,
    text: `${campaign.serial} on ${campaign.rigName}, cycle ${phase.cycle}: ${verdict.text}`,
    actionText: actions.join(" "),
    mail: limit.does.includes("mail"),
  });
  if (limit.does.includes("cleanAgain")) await cleanAgain(transaction, campaign, limit);
  if (!opened) return;
  await recordEvent(transaction, { campaignId: campaign.id, now, kind: "limit", who: "Longreed", text: `${verdict.text}. ${actions.join(" ")}`, sequence: phase.sequence });
  if (limit.does.includes("stop")) await endCampaign(transaction, { campaign, state: "stopped", text: verdict.text, by: "longreed", now });
  else if (limit.does.includes("hold")) await openHold(transaction, { campaignId: campaign.id, reason: "limit", text: verdict.text, by: "longreed", now });
}

async function cleanAgain(transaction: Transaction, campaign: CampaignRow, limit: Limit) {
  const fresh = await row<{ cursor: CampaignRow["cursor"] }>(`select cursor from campaign where id = $1`, [campaign.id], transaction);
  if (!fresh?.cursor) return;
  const cursor = redirect(campaign.definition, fresh.cursor, { kind: "cleanAgain", limitId: limit.id, maxTimes: limit.maxTimes });
  if (!("impossible" in cursor)) await change(`update campaign set cursor = $2 where id = $1`, [campaign.id, JSON.stringify(cursor)], transaction);
}

/** Within the dead time after the limit's last alarm, on rig time, a breach says nothing new. */
async function isDead(transaction: Transaction, campaign: CampaignRow, limit: Limit): Promise<boolean> {
  if (!limit.deadTimeS || !campaign.clock) return false;
  const last = await row(
    `select id from alarm where campaign_id = $1 and limit_id = $2 and state = 'cleared' and opened_clock > $3 limit 1`,
    [campaign.id, limit.id, new Date(campaign.clock.getTime() - limit.deadTimeS * 1000)],
    transaction,
  );
  return last !== undefined;
}
