import type { Transaction } from "sequelize";
import { failureIsOver } from "@/lib/alarms/failure-is-over";
import { audit } from "@/lib/audit/record";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { lockedFor } from "@/lib/campaigns/locked-for";
import { releaseHolds } from "@/lib/campaigns/release-hold";
import type { HoldReason } from "@/lib/campaigns/open-hold";
import type { ResumeFrom } from "@/lib/campaigns/schema";
import { lastClosed, openStep, skipStep, type StepState } from "@/lib/campaigns/steps-of-campaign";
import { change, inTransaction, row, rows } from "@/lib/db";
import { conflict, impossible } from "@/lib/errors";
import { demand, type Actor } from "@/lib/people/actor";
import { redirect } from "@/lib/protocol/interpreter";

type ResumeCampaign = { by: Actor; campaignId: string; from: ResumeFrom; now: Date };

const WAITS_FOR: Partial<Record<HoldReason, string>> = {
  task: "a task is open; it goes on when the task is answered",
  takeOver: "a person works at the rig; it goes on when the rig is given back",
  silence: "the rig agent is silent; it goes on when the agent is heard again",
};

/**
 * A person lets a campaign go on: here, from the beginning of the phase, or of the cycle. Releases holds by a person, a limit or
 * a failure, and holds for tasks of which none is open any more because somebody could not do it; brings a campaign back that
 * was set aside. Resuming a running campaign changes nothing.
 */
export function resumeCampaign({ by, campaignId, from, now }: ResumeCampaign) {
  return inTransaction(async (transaction) => {
    const campaign = await lockedFor(transaction, { by, permission: "resume campaigns", campaignId, now });
    if (campaign.state === "running") return { id: campaignId, state: "running" as const };
    if (campaign.state !== "held") throw conflict(`A campaign that is ${campaign.state} cannot go on; only a held one can`);
    if (campaign.parking === "wanted" || campaign.parking === "running") {
      throw conflict("The cell is being parked; the campaign can go on when that has ended");
    }
    const holds = await rows<{ reason: HoldReason }>(
      `select h.reason from hold h where h.campaign_id = $1 and h.released_at is null order by h.opened_at`,
      [campaignId],
      transaction,
    );
    const setAside = holds.some(({ reason }) => reason === "setAside");
    if (setAside) demand(by, "set campaigns aside");
    const released = await releasable(transaction, campaign, holds.map(({ reason }) => reason), from);
    await redirectCursor(transaction, campaign, { setAside, from, by, now });
    await releaseHolds(transaction, { campaignId, reasons: released, by, now });
    if (released.includes("failure") || released.includes("limit")) await failureIsOver(transaction, { campaignId, by, now });
    await audit(transaction, { by, now, action: "resume", entity: "campaign", entityId: campaignId, detail: { from } });
    const after = await row<{ state: "running" | "held" }>(`select state from campaign where id = $1`, [campaignId], transaction);
    return { id: campaignId, state: after?.state ?? ("held" as const) };
  });
}

async function releasable(transaction: Transaction, campaign: CampaignRow, reasons: HoldReason[], from: ResumeFrom): Promise<HoldReason[]> {
  const waits = reasons.includes("task") && (await row(`select id from operator_task where campaign_id = $1 and state = 'open' limit 1`, [campaign.id], transaction));
  const released = reasons.filter((reason) => !(reason in WAITS_FOR) || (reason === "task" && !waits));
  if (released.length === 0) throw conflict(`The campaign waits: ${WAITS_FOR[reasons[0]] ?? "nothing holds it"}`);
  if (!reasons.includes("setAside")) return released;
  if (from === "here") throw impossible("A campaign that was set aside comes back from the phase or the cycle, with a new reference first");
  const mount = await row(
    `select id from mount where sensor_id = $1 and rig_id = $2 and upper_inf(period)`,
    [campaign.sensorId, campaign.rigId],
    transaction,
  );
  if (!mount) throw impossible(`Mount ${campaign.serial} on ${campaign.rigName} first`);
  const other = await row<{ name: string }>(
    `select name from campaign where rig_id = $1 and id <> $2 and origin = 'protocol' and not set_aside
       and (state in ('running', 'held') or parking in ('wanted', 'running'))`,
    [campaign.rigId, campaign.id],
    transaction,
  );
  if (other) throw conflict(`${campaign.rigName} is taken by ${other.name}`);
  return released;
}

type Onward = { setAside: boolean; from: ResumeFrom; by: Actor; now: Date };

async function redirectCursor(transaction: Transaction, campaign: CampaignRow, { setAside, from, by, now }: Onward): Promise<void> {
  if (!campaign.cursor) throw conflict("The campaign has not started");
  if (from === "here" && campaign.cursor.parked?.begun) {
    throw impossible("The cell was parked; the campaign can go on from the phase or the cycle, not from here");
  }
  const last = await lastClosed(transaction, campaign.id);
  if (from === "here" && last?.state === "failed" && last.detour !== "park") {
    await change(
      `update step set state = 'ready', closed_at = null, empty_attempts = 0, failure = null where id = $1`,
      [last.id],
      transaction,
    );
    await change(`update phase set closed_at = null where step_id = $1`, [last.id], transaction);
    return;
  }
  const open = await openStep(transaction, campaign.id);
  if (from === "here" && open) return;
  if (open?.state === "out") throw conflict("The rig agent has not ended the present step yet; try again in a moment");
  const cursor = redirect(campaign.definition, campaign.cursor, setAside && from !== "here" ? { kind: "reference", from } : { kind: "resume", from });
  if ("impossible" in cursor) throw impossible(cursor.impossible);
  if (open) await giveUp(transaction, campaign.id, open, by, now);
  await change(
    `update campaign set cursor = $2, parking = 'none', set_aside = false, needs_advance = true where id = $1`,
    [campaign.id, JSON.stringify(cursor)],
    transaction,
  );
}

/** The step is not wanted any more. If it is a question, it is asked again when its turn comes, and nothing waits for this one. */
async function giveUp(transaction: Transaction, campaignId: string, step: StepState, by: Actor, now: Date): Promise<void> {
  const question = await row<{ holdId: string | null }>(
    `select hold_id as "holdId" from operator_task where campaign_id = $1 and step_id = $2 and kind = 'ask'`,
    [campaignId, step.id],
    transaction,
  );
  await skipStep(transaction, { stepId: step.id, now });
  if (question?.holdId) await releaseHolds(transaction, { campaignId, holdId: question.holdId, by, now });
}
