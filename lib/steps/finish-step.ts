import type { Transaction } from "sequelize";
import { noteContact } from "@/lib/agents/contact";
import type { Agent } from "@/lib/agents/contract";
import { protocolTime } from "@/lib/agents/rig-clock";
import type { FinishBody } from "@/lib/agents/schema";
import { countFailure, failuresAreOver } from "@/lib/alarms/count-failures";
import { wakeCampaign } from "@/lib/campaigns/wake-campaign";
import { change, inTransaction, row } from "@/lib/db";
import { conflict, impossible, notFound } from "@/lib/errors";
import { failStep } from "@/lib/steps/fail-step";
import { missingRanges, rangesInWords } from "@/lib/steps/missing";
import { recordVolumes } from "@/lib/steps/record-volumes";
import { waitForBottle } from "@/lib/steps/wait-for-bottle";

type Finish = { agent: Agent; session?: string; stepId: string; body: FinishBody; now: Date };

type LeasedStep = {
  id: string;
  campaignId: string;
  rigId: string;
  kind: string;
  label: string;
  cycle: number;
  sequence: number;
  state: "ready" | "out" | "done" | "failed" | "skipped";
  repeats: number | null;
  stored: number;
  storedAtIssue: number;
  emptyAttempts: number;
  maxAttempts: number;
  port: number | null;
  current: boolean;
  everLeased: boolean;
  campaignState: string;
  detour: string | null;
};

const LEASED_STEP = `
  select s.id, s.campaign_id as "campaignId", s.rig_id as "rigId", s.kind, s.label, s.cycle, s.sequence, s.state, (s.params->>'repeats')::int as repeats,
         s.stored, s.stored_at_issue as "storedAtIssue", s.empty_attempts as "emptyAttempts",
         coalesce((v.definition->>'maxAttempts')::int, 3) as "maxAttempts", slot.port, c.state as "campaignState", s.detour,
         s.lease is not distinct from $3 as current,
         exists (select 1 from step_lease l where l.lease = $3 and l.step_id = s.id) as "everLeased"
    from step s
    join campaign c on c.id = s.campaign_id
    join protocol_version v on v.id = s.protocol_version_id
    left join campaign_slot slot on slot.campaign_id = c.id and slot.slot = s.slot
   where s.id = $1 and s.rig_id = $2
   for no key update of s`;

/** The agent ends a step. Saying it again is a success; under a lease that was given out again it is not. */
export function finishStep({ agent, session, stepId, body, now }: Finish) {
  return inTransaction(async (transaction) => {
    const rig = await noteContact(transaction, { agent, session, now });
    const step = await row<LeasedStep>(LEASED_STEP, [stepId, agent.rigId, body.lease], transaction);
    if (!step) throw notFound("step on this rig");
    if (!step.everLeased) throw conflict("This lease was never given out for this step", "lease-lost");

    const ended = await alreadyEnded(transaction, step, body.lease);
    if (ended) return answer(step, ended);

    const clock = protocolTime(rig, now) ?? now;
    if (body.outcome === "done") return answer(step, await endDone(transaction, step, clock, now));
    if (body.outcome === "interrupted") return answer(step, await putBack(transaction, step));
    return answer(step, await endFailed(transaction, step, body.failure, now));
  });
}

/** What an earlier, equal call made of the step; refuses when another lease is the present one. */
async function alreadyEnded(transaction: Transaction, step: LeasedStep, lease: string): Promise<"done" | "ready" | "failed" | undefined> {
  if (step.current && step.state === "out") return undefined;
  const newest = await row<{ lease: string }>(
    `select lease from step_lease where step_id = $1 order by ordinal desc limit 1`,
    [step.id],
    transaction,
  );
  if (newest?.lease !== lease) throw conflict("The step was given out again under another lease; ask for the next step", "lease-lost");
  if (step.state === "skipped") return "done";
  return step.state === "out" ? undefined : step.state;
}

async function endDone(transaction: Transaction, step: LeasedStep, clock: Date, now: Date): Promise<"done"> {
  if (step.kind === "measure") {
    const missing = step.stored < (step.repeats ?? 0) ? await missingRanges(transaction, step.id, step.repeats ?? 0) : [];
    if (missing.length > 0) {
      throw impossible(`Readings are missing: ${rangesInWords(missing)}. Upload them, then finish again`, { missing });
    }
  }
  await change(
    `update step set state = 'done', closed_at = $2, ended_clock = $3, lease_expires_at = null, failure = null where id = $1`,
    [step.id, now, clock],
    transaction,
  );
  if (step.kind !== "measure") await recordVolumes(transaction, step.id);
  await failuresAreOver(transaction, { campaignId: step.campaignId, now });
  await wakeCampaign(transaction, step.campaignId);
  return "done";
}

/** Counts nowhere: the readings stay and the step is given out again when the campaign goes on. */
async function putBack(transaction: Transaction, step: LeasedStep): Promise<"ready"> {
  await change(`update step set state = 'ready', lease_expires_at = null, empty_attempts = 0 where id = $1`, [step.id], transaction);
  await wakeCampaign(transaction, step.campaignId);
  return "ready";
}

async function endFailed(
  transaction: Transaction,
  step: LeasedStep,
  failure: Extract<FinishBody, { outcome: "failed" }>["failure"],
  now: Date,
): Promise<"ready" | "failed"> {
  if (failure.code === "port-empty" || failure.code === "waste-full") {
    await change(`update step set state = 'ready', lease_expires_at = null where id = $1`, [step.id], transaction);
    const isOver = step.campaignState !== "running" && step.campaignState !== "held" && step.detour !== "park";
    if (!isOver) await waitForBottle(transaction, { step, failure, now });
    await wakeCampaign(transaction, step.campaignId);
    return "ready";
  }
  const emptyAttempts = step.stored > step.storedAtIssue ? 0 : step.emptyAttempts + 1;
  if (!failure.retry || emptyAttempts >= step.maxAttempts) {
    await failStep(transaction, { step, failure, now });
    await countFailure(transaction, { step, now });
    return "failed";
  }
  await change(
    `update step set state = 'ready', lease_expires_at = null, empty_attempts = $2, failure = $3 where id = $1`,
    [step.id, emptyAttempts, JSON.stringify(failure)],
    transaction,
  );
  await countFailure(transaction, { step, now });
  await wakeCampaign(transaction, step.campaignId);
  return "ready";
}

function answer(step: LeasedStep, state: "done" | "ready" | "failed") {
  const goesOn = step.campaignState === "running" && state !== "failed";
  return { step: state, next: goesOn || step.detour === "park" ? ("ask" as const) : ("wait" as const) };
}
