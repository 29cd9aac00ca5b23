import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { endCampaign } from "@/lib/campaigns/end";
import { openHold } from "@/lib/campaigns/open-hold";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, row } from "@/lib/db";
import { redirect } from "@/lib/protocol/interpreter";
import type { Limit } from "@/lib/protocol/schema";

type Breach = {
  campaign: CampaignRow;
  limit: Limit;
  /** What was found, and how far beyond the limit. */
  found: { value: number; limit: number; unit: string; text: string };
  /** Where it was found. */
  at: { cycle: number; sequence: number; stepId: string; phaseId?: string; fitRunId?: string };
  now: Date;
};

/** Does what a broken limit says: notes it, or opens an alarm, mails, holds, cleans again, stops. */
export async function carryOutBreach(transaction: Transaction, { campaign, limit, found, at, now }: Breach): Promise<void> {
  if (await isDead(transaction, campaign, limit)) return;
  const note = (text: string) => recordEvent(transaction, { campaignId: campaign.id, now, kind: "limit", who: "Longreed", text, sequence: at.sequence });
  if (limit.does.every((what) => what === "note")) return note(found.text);

  const actionText = consequenceOf(limit);
  const { opened } = await openAlarm(transaction, {
    now,
    clock: campaign.clock,
    rigId: campaign.rigId,
    campaignId: campaign.id,
    sensorId: campaign.sensorId,
    source: "limit",
    limitId: limit.id,
    kind: limit.kind,
    phaseId: at.phaseId,
    stepId: at.stepId,
    fitRunId: at.fitRunId,
    value: found.value,
    limitValue: found.limit,
    unit: found.unit,
    text: `${campaign.serial} on ${campaign.rigName}, cycle ${at.cycle}: ${found.text}`,
    actionText,
    mail: limit.does.includes("mail"),
  });
  if (limit.does.includes("cleanAgain")) await cleanAgain(transaction, campaign, limit);
  if (!opened) return;
  await note(`${found.text}. ${actionText}`);
  if (limit.does.includes("stop")) await endCampaign(transaction, { campaign, state: "stopped", text: found.text, by: "longreed", now });
  else if (limit.does.includes("hold")) await openHold(transaction, { campaignId: campaign.id, reason: "limit", text: found.text, by: "longreed", now });
}

function consequenceOf({ does }: Limit): string {
  if (does.includes("stop")) return "The campaign was stopped.";
  if (does.includes("hold")) return "The campaign holds.";
  if (does.includes("cleanAgain")) return "The cell is cleaned again, then the reference is measured once more.";
  return "Measuring goes on.";
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
