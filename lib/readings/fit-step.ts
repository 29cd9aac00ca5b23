import type { Transaction } from "sequelize";
import { change, inTransaction, rows } from "@/lib/db";
import { flagBits } from "@/lib/numerics/resonance/flags";
import type { AskedSweep } from "@/lib/numerics/resonance/judge-given";
import type { Readout } from "@/lib/numerics/resonance/types";
import { refreshPhase } from "@/lib/phases/close-phase";
import { fitRecord } from "@/lib/readings/fit-record";
import type { FitSettings } from "@/models/json";

export const BATCH = 200;

type FitContext = { fitRunId: string; settings: FitSettings; readout: Readout; asked: AskedSweep | null };

type Asked = { stepId: string; from?: number; now: Date };

/** Steps that this process is fitting: who asks again waits, then finds what is left, instead of fitting the same once more. */
const inHand = new Map<string, Promise<unknown>>();

/**
 * Fits what of a step has no fit yet in the campaign's current run. Any number of processes may do it at once:
 * the first result of a reading stays, and equal input gives an equal result. What came too late for its phase is shown with
 * it all the same. Whoever knows which readings are new looks from the first of them on: a long step is not gone through each
 * time. Returns how many were fitted.
 */
export async function fitStep(asked: Asked): Promise<number> {
  const before = inHand.get(asked.stepId) ?? Promise.resolve();
  const work = before.catch(() => undefined).then(() => fitAll(asked));
  inHand.set(asked.stepId, work);
  try {
    return await work;
  } finally {
    if (inHand.get(asked.stepId) === work) inHand.delete(asked.stepId);
  }
}

async function fitAll({ stepId, from = 0, now }: Asked): Promise<number> {
  let fitted = 0;
  for (;;) {
    const n = await fitBatch({ stepId, from });
    fitted += n;
    if (n < BATCH) break;
  }
  if (fitted > 0) await inTransaction((transaction) => refreshPhase(transaction, { stepId, now }));
  return fitted;
}

/** The same within a transaction, for whoever decides on the fits: what came after the last look is in them too. */
export async function fitRest(transaction: Transaction, stepId: string, fitRunId?: string): Promise<void> {
  while ((await fitBatch({ stepId, fitRunId }, transaction)) === BATCH);
}

type Waiting = FitContext & { idx: number; kind: number; flags: number; startHz: number | null; stopHz: number | null; points: number; data: Buffer };

// One look-up a reading, by the whole key: PostgreSQL takes a new step for one row and would go through it once for each.
const WAITING = `
  select run.id as "fitRunId", run.settings, coalesce(v.definition->>'readout', (select readout from phase where step_id = s.id)) as readout, s.params->'sweep' as asked,
         r.idx, r.kind, r.flags, w.start_hz as "startHz", w.stop_hz as "stopHz", w.points, w.data
    from step s join fit_run run on run.campaign_id = s.campaign_id and case when $3::bigint is null then run.current else run.id = $3 end left join protocol_version v on v.id = s.protocol_version_id
   cross join lateral (select idx from reading where step_id = $1 and idx >= $2
                         except select idx from fit where fit_run_id = run.id and step_id = $1 and idx >= $2 order by idx limit ${BATCH}) left_over
   cross join lateral (select * from reading where step_id = $1 and idx = left_over.idx offset 0) r
   cross join lateral (select * from sweep where step_id = $1 and idx = left_over.idx offset 0) w
   where s.id = $1
   order by r.idx`;

/** Fits the first that have no fit yet, in the named run or else the current; returns how many. Fewer than a full batch: nothing is left. */
export async function fitBatch({ stepId, from = 0, fitRunId }: { stepId: string; from?: number; fitRunId?: string }, transaction?: Transaction): Promise<number> {
  const waiting = await rows<Waiting>(WAITING, [stepId, from, fitRunId ?? null], transaction);
  if (waiting.length === 0) return 0;
  const [context] = waiting;
  const fits = waiting.map((stored) => ({ stored, fit: fitRecord(stored, context) }));
  const column = (pick: (one: (typeof fits)[number]) => number) => fits.map((one) => finiteOrNull(pick(one)));
  await change(
    `insert into fit (fit_run_id, step_id, idx, f0_hz, q, f0_std_hz, q_std, f0_q_covariance, amplitude_v, noise_v, flags)
     select $1, $2, * from unnest($3::int[], $4::float8[], $5::float8[], $6::float8[], $7::float8[], $8::float8[], $9::float8[], $10::float8[], $11::smallint[])
     on conflict do nothing`,
    [
      context.fitRunId,
      stepId,
      waiting.map(({ idx }) => idx),
      column(({ fit }) => fit.f0Hz),
      column(({ fit }) => fit.q),
      column(({ fit }) => fit.f0StdHz),
      column(({ fit }) => fit.qStd),
      column(({ fit }) => fit.covarianceF0Q),
      column(({ fit }) => fit.amplitude),
      column(({ fit }) => fit.noise),
      fits.map(({ stored, fit }) => stored.flags | flagBits(fit.flags)),
    ],
    transaction,
  );
  return waiting.length;
}

const finiteOrNull = (value: number): number | null => (Number.isFinite(value) ? value : null);
