import { setImmediate } from "node:timers/promises";
import type { Transaction } from "sequelize";
import { change, inTransaction, row, rows } from "@/lib/db";
import { judgePhase } from "@/lib/limits/judge";
import { notify } from "@/lib/notify";
import { IMPORTED_AIR_REFERENCES, updateBaseline } from "@/lib/phases/baseline";
import { closePhase } from "@/lib/phases/close-phase";
import { limitFacts } from "@/lib/phases/limit-facts";
import type { Definition } from "@/lib/protocol/schema";
import { BATCH, fitBatch, fitRest } from "@/lib/readings/fit-step";
import type { FoundOnRefit } from "@/models/json";

/** Fit runs that wait for a worker, or that one left unfinished. */
export const findWaitingRuns = async (): Promise<string[]> =>
  (await rows<{ id: string }>(`select id from fit_run where state = 'waiting' order by id`)).map(({ id }) => id);

type CarryOn = { fitRunId: string; now: Date; /** Whether the worker has time for another phase. */ hasTime: () => boolean };

/**
 * Goes on with a fit run, phase after phase in the order in which they were measured: fits, phase value, baseline, and what the limits would
 * have said, as when they were new. Any number of workers may do it at once, and any may stop at any time. Returns whether something is left.
 */
export async function carryOn({ fitRunId, now, hasTime }: CarryOn): Promise<boolean> {
  for (;;) {
    const step = await nextStep(fitRunId);
    if (!step) {
      await finish(fitRunId, now);
      return false;
    }
    for (let n = BATCH; n === BATCH; await setImmediate()) {
      if (!hasTime()) return true;
      n = await fitBatch({ stepId: step.stepId, fitRunId });
      if (!(await progress(fitRunId, n))) return false;
    }
    await inTransaction((transaction) => close(transaction, { ...step, fitRunId, now }));
  }
}

type Next = { stepId: string; campaignId: string; definition: Definition | null };

const nextStep = (fitRunId: string): Promise<Next | undefined> =>
  row<Next>(
    `select p.step_id as "stepId", p.campaign_id as "campaignId", v.definition
       from fit_run run join phase p on p.campaign_id = run.campaign_id and p.closed_at is not null
       join step s on s.id = p.step_id left join protocol_version v on v.id = s.protocol_version_id
      where run.id = $1 and run.state = 'waiting'
        and not exists (select 1 from phase_summary where phase_id = p.id and fit_run_id = run.id)
      order by p.sequence limit 1`,
    [fitRunId],
  );

/** Whether the run still wants to be made. */
async function progress(fitRunId: string, n: number): Promise<boolean> {
  const run = await row<{ campaignId: string }>(
    `update fit_run set done = least(total, done + $2) where id = $1 and state = 'waiting' returning campaign_id as "campaignId"`,
    [fitRunId, n],
  );
  return run !== undefined;
}

type Close = Next & { fitRunId: string; now: Date };

async function close(transaction: Transaction, { stepId, fitRunId, campaignId, definition, now }: Close): Promise<void> {
  const run = await row<{ found: FoundOnRefit[] }>(`select found from fit_run where id = $1 and state = 'waiting' for no key update`, [fitRunId], transaction);
  if (!run) return;
  await takeUpPhase(transaction, { stepId, fitRunId, campaignId, definition, now });
}

/** The definition is null for a phase that was imported. */
type TakeUp = { stepId: string; fitRunId: string; campaignId: string; definition: Definition | null; now: Date };

/** Makes a closed phase part of a fit run: what is left to fit, its value, the run's baseline, and limits that it breaks. The run's row is locked. */
export async function takeUpPhase(transaction: Transaction, { stepId, fitRunId, campaignId, definition, now }: TakeUp): Promise<void> {
  await fitRest(transaction, stepId, fitRunId);
  const phase = await closePhase(transaction, { stepId, fitRunId, now });
  if (!phase || phase.columns.n === 0) return;
  const { mountId, setPointC, readout, phaseId, cycle } = phase;
  const airReferences = definition?.baseline.airReferences ?? IMPORTED_AIR_REFERENCES;
  const present = mountId || !definition ? await updateBaseline(transaction, { campaignId, mountId, setPointC, readout, fitRunId }, { airReferences, now }) : undefined;
  const facts = await limitFacts(transaction, { campaignId, phase, baseline: present });
  const found = judgePhase(definition?.limits ?? [], facts)
    .filter(({ state }) => state === "breach")
    .map(({ limitId, kind, value, limit, unit, text }): FoundOnRefit => ({ limitId, kind, phaseId, stepId, cycle, value, limit, unit, text }));
  for (const one of found) {
    await change(
      `update fit_run set found = found || $2::jsonb
        where id = $1 and not exists (select 1 from jsonb_array_elements(found) earlier where earlier->>'limitId' = $3)`,
      [fitRunId, JSON.stringify([one]), one.limitId],
      transaction,
    );
  }
}

async function finish(fitRunId: string, now: Date): Promise<void> {
  const run = await row<{ campaignId: string }>(
    `update fit_run set state = 'ready', done = total, finished_at = $2 where id = $1 and state = 'waiting' returning campaign_id as "campaignId"`,
    [fitRunId, now],
  );
  if (run) await notify(`changed:campaign:${run.campaignId}`);
}
