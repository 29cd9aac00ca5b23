import { randomBytes } from "node:crypto";
import type { Transaction } from "sequelize";
import type { RigRow } from "@/lib/agents/contact";
import { LEASE_S } from "@/lib/agents/contract";
import { protocolTime } from "@/lib/agents/rig-clock";
import type { StepAnswer } from "@/lib/agents/schema";
import { countFailure } from "@/lib/alarms/count-failures";
import { wakeCampaign } from "@/lib/campaigns/wake-campaign";
import { change, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import type { StepPlan } from "@/lib/protocol/types";
import { askForALook } from "@/lib/steps/ask-for-a-look";
import { failStep } from "@/lib/steps/fail-step";
import { missingRanges } from "@/lib/steps/missing";
import type { StepProgress } from "@/models/json";

export type OpenStep = {
  id: string;
  campaignId: string;
  campaignNumber: number;
  campaignState: string;
  parking: string;
  rigId: string;
  sequence: number;
  kind: StepAnswer["kind"];
  role: string | null;
  medium: string | null;
  slot: string | null;
  cycle: number;
  label: string;
  detour: string | null;
  params: StepPlan["params"];
  state: "ready" | "out";
  attempt: number;
  emptyAttempts: number;
  stored: number;
  storedAtIssue: number;
  /** Heartbeats told of it going on since it was last given out. */
  progressed: boolean;
  done: StepProgress | null;
  port: number | null;
  liquidName: string | null;
  maxAttempts: number;
  /** A person works at the rig, or has an errand to run for this very step. */
  blocked: boolean;
  /** Lent a moment ago to the very session that asks again: the answer was lost, nothing was tried. */
  answerLost: boolean;
};

const OPEN_STEP = `
  select s.id, s.campaign_id as "campaignId", c.rig_number as "campaignNumber", c.state as "campaignState", c.parking, s.rig_id as "rigId",
         s.sequence, s.kind, s.role, s.medium, s.slot, s.cycle, s.label, s.detour, s.params, s.state, s.attempt,
         s.empty_attempts as "emptyAttempts", s.stored, s.stored_at_issue as "storedAtIssue", s.progressed, s.done, slot.port, liquid.name as "liquidName",
         coalesce((v.definition->>'maxAttempts')::int, 3) as "maxAttempts",
         exists (select 1 from operator_task t where t.campaign_id = c.id and t.step_id = s.id and t.state = 'open')
           or exists (select 1 from hold h where h.campaign_id = c.id and h.reason = 'takeOver' and h.released_at is null) as blocked,
         s.lease_expires_at > $2 and (select l.agent_session_id from step_lease l where l.lease = s.lease)
           is not distinct from (select id from agent_session where rig_id = $1 and ended_at is null) as "answerLost"
    from step s
    join campaign c on c.id = s.campaign_id
    join protocol_version v on v.id = s.protocol_version_id
    left join campaign_slot slot on slot.campaign_id = c.id and slot.slot = coalesce(s.slot, s.medium)
    left join lot on lot.id = slot.lot_id
    left join liquid on liquid.id = lot.liquid_id
   where s.rig_id = $1 and s.state in ('ready', 'out') and s.kind not in ('wait', 'ask') and not c.set_aside
   order by (s.state = 'out') desc, s.id
   limit 1
   for no key update of s`;

type GiveOut = { rig: RigRow; session?: string; now: Date };

/** Gives the rig's open step out under a fresh lease, or nothing. A physical act whose outcome nobody knows is not given out again blindly. */
export async function giveOut(transaction: Transaction, { rig, session, now }: GiveOut): Promise<StepAnswer | undefined> {
  const step = await row<OpenStep>(OPEN_STEP, [rig.id, now], transaction);
  if (!step) return undefined;

  const parks = step.detour === "park" && step.parking === "running";
  if (step.blocked || (step.campaignState !== "running" && !parks)) {
    if (step.state === "out") await takeBack(transaction, step, rig, now);
    return undefined;
  }
  if (step.state === "out") {
    const emptyAttempts = step.stored > step.storedAtIssue || step.progressed ? 0 : step.emptyAttempts + (step.answerLost ? 0 : 1);
    if (emptyAttempts >= step.maxAttempts) {
      await failStep(transaction, {
        step,
        now,
        failure: { code: "other", message: `given out ${emptyAttempts} times in a row and nothing came back`, retry: false },
      });
      await countFailure(transaction, { step, now });
      return undefined;
    }
    if (emptyAttempts > step.emptyAttempts) {
      await countFailure(transaction, { step, now });
      if (!(await stillWanted(transaction, step, rig, now))) return undefined;
    }
    step.emptyAttempts = emptyAttempts;
    if (await nobodyKnows(transaction, step, rig)) {
      await askForALook(transaction, { step, now });
      return undefined;
    }
  }
  return lend(transaction, { step, rig, session, now });
}

/** A limit on failed attempts may just have held or stopped the campaign. */
async function stillWanted(transaction: Transaction, step: OpenStep, rig: RigRow, now: Date): Promise<boolean> {
  const campaign = await row<{ state: string }>(`select state from campaign where id = $1`, [step.campaignId], transaction);
  if (campaign?.state === step.campaignState) return true;
  await takeBack(transaction, { ...step, campaignState: campaign?.state ?? "stopped" }, rig, now);
  return false;
}

/** An agent that lost its memory asks while nothing may go out: the step waits, or is over. What it was pumping somebody looks at first. */
async function takeBack(transaction: Transaction, step: OpenStep, rig: RigRow, now: Date) {
  const isOver = step.campaignState !== "running" && step.campaignState !== "held" && step.detour !== "park";
  if (!isOver && (await nobodyKnows(transaction, step, rig))) return askForALook(transaction, { step, now });
  const state = isOver ? "skipped" : "ready";
  await change(
    `update step set state = $2, lease = null, lease_expires_at = null, closed_at = case when $2 = 'skipped' then $3::timestamptz end where id = $1`,
    [step.id, state, now],
    transaction,
  );
  await wakeCampaign(transaction, step.campaignId);
}

/** A fill or rinse that was out, without a word of how far it came, by an agent that did not say it can repeat that kind. */
async function nobodyKnows(transaction: Transaction, step: OpenStep, rig: RigRow): Promise<boolean> {
  if ((step.kind !== "fill" && step.kind !== "rinse") || step.done) return false;
  const session = await row<{ repeatable: string[] }>(
    `select repeatable from agent_session where rig_id = $1 and ended_at is null`,
    [rig.id],
    transaction,
  );
  return !session?.repeatable.includes(step.kind);
}

type Lend = { step: OpenStep; rig: RigRow; session?: string; now: Date };

async function lend(transaction: Transaction, { step, rig, session, now }: Lend): Promise<StepAnswer> {
  const lease = randomBytes(18).toString("base64url");
  const leaseExpiresAt = new Date(now.getTime() + LEASE_S * 1000);
  const clock = protocolTime(rig, now) ?? now;
  await change(
    `update step set state = 'out', attempt = attempt + 1, empty_attempts = $2, stored_at_issue = stored, progressed = false, lease = $3, lease_expires_at = $4,
       given_at = coalesce(given_at, $5), started_clock = coalesce(started_clock, $6) where id = $1`,
    [step.id, step.emptyAttempts, lease, leaseExpiresAt, now, clock],
    transaction,
  );
  await change(
    `insert into step_lease (lease, step_id, rig_id, agent_session_id, given_at)
     values ($1, $2, $3, (select id from agent_session where rig_id = $3 and ended_at is null and session = coalesce($4, session)), $5)`,
    [lease, step.id, rig.id, session ?? null, now],
    transaction,
  );
  await notify(`changed:campaign:${step.campaignId}`, transaction);

  const repeats = "repeats" in step.params ? step.params.repeats : 0;
  const missing = step.kind === "measure" && step.attempt > 0 ? await missingRanges(transaction, step.id, repeats) : undefined;
  return {
    id: step.id,
    campaignId: step.campaignId,
    campaignNumber: step.campaignNumber,
    sequence: step.sequence,
    kind: step.kind,
    ...(step.role ? { role: step.role } : {}),
    attempt: step.attempt + 1,
    lease,
    leaseExpiresAt: leaseExpiresAt.toISOString(),
    resumeFrom: missing ? (missing[0]?.[0] ?? repeats) : 0,
    ...(missing ? { missing } : {}),
    ...(step.done ? { done: step.done } : {}),
    cycle: step.cycle,
    label: step.label,
    params: agentParams(step),
  };
}

/** What the interpreter planned, with the port that the slot is bound to; what only Longreed needs is left out. */
function agentParams(step: OpenStep): StepAnswer["params"] {
  const { params } = step;
  if ("sweep" in params) {
    const { repeats, pauseS, sweep } = params;
    const medium = step.medium as string;
    const liquid = medium !== "air" && step.port !== null ? { slot: medium, port: step.port, name: step.liquidName ?? medium } : undefined;
    return { medium, ...(liquid ? { liquid } : {}), repeats, pauseS, sweep };
  }
  if (step.kind === "fill" || step.kind === "rinse") return { port: step.port as number, ...(params as { volumeMl: number }) };
  return params as StepAnswer["params"];
}

