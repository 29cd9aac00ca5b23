import type { Transaction } from "sequelize";
import { change, row, rows } from "@/lib/db";
import { notify } from "@/lib/notify";
import { columnsOf, encodeColumns, type PhaseColumns, type Repeat } from "@/lib/phases/columns";
import { markLeftOut, summarise, type PhaseSummaryValues } from "@/lib/phases/summarise";
import { writeLevels } from "@/lib/phases/write-levels";

export type ClosedPhase = {
  phaseId: string;
  fitRunId: string;
  medium: string;
  role: "reference" | "check" | "sample";
  sequence: number;
  cycle: number;
  setPointC: number | null;
  mountId: string | null;
  readout: "velocity" | "displacement";
  columns: PhaseColumns;
  values: PhaseSummaryValues;
};

/** The repeats of a phase with their fits, and the mean pressure. */
export type Measured = {
  columns: PhaseColumns;
  pressurePa: number | null;
  /** Standard errors of Q, repeat by repeat, where the fits gave them: a phase of one repeat has no other uncertainty. */
  qStd?: Float64Array;
};

type PhaseRow = Omit<ClosedPhase, "columns" | "values"> & {
  stepId: string;
  campaignId: string;
  discard: number;
  givenUp: boolean;
  tracked: boolean;
};

const PHASE = `
  select p.id as "phaseId", r.id as "fitRunId", p.step_id as "stepId", p.campaign_id as "campaignId", p.medium, p.role, p.sequence, p.cycle,
         p.set_point_c as "setPointC", p.mount_id as "mountId", p.readout, p.discard,
         s.state in ('skipped', 'failed') as "givenUp",
         coalesce(jsonb_path_query_first(v.definition, '$.** ? (@.id == $$block).sweep.centre', jsonb_build_object('block', s.block_id)) = '"track"', false) as tracked
    from phase p join step s on s.id = p.step_id left join protocol_version v on v.id = s.protocol_version_id
    join fit_run r on r.campaign_id = p.campaign_id and case when $2::bigint is null then r.current else r.id = $2 end
   where p.step_id = $1`;

/** Brings the summary of a phase that has closed up to date, after late readings or exclusions. Decides nothing anew. */
export async function refreshPhase(transaction: Transaction, { stepId, now }: { stepId: string; now: Date }): Promise<void> {
  const closed = await row(`select id from phase where step_id = $1 and closed_at is not null for no key update`, [stepId], transaction);
  if (closed) await closePhase(transaction, { stepId, now });
}

/** The same in every fit run that has a summary of the phase. */
export async function refreshPhaseInEveryRun(transaction: Transaction, { stepId, now }: { stepId: string; now: Date }): Promise<void> {
  const runs = await rows<{ fitRunId: string }>(
    `select s.fit_run_id as "fitRunId" from phase p join phase_summary s on s.phase_id = p.id where p.step_id = $1 and p.closed_at is not null
      order by s.fit_run_id for no key update of p`,
    [stepId],
    transaction,
  );
  for (const { fitRunId } of runs) await closePhase(transaction, { stepId, fitRunId, now });
}

/**
 * Makes the summary of a step's phase from its fits in the named run, else the current. Undefined for a step without a phase (`find`). All readings have to be fitted before.
 */
export async function closePhase(transaction: Transaction, { stepId, fitRunId, now }: { stepId: string; fitRunId?: string; now: Date }): Promise<ClosedPhase | undefined> {
  const phase = await row<PhaseRow>(PHASE, [stepId, fitRunId ?? null], transaction);
  return phase && close(transaction, phase, await readColumns(transaction, phase), now);
}

/** The same for whoever has just stored the repeats and has them at hand, as an import has: nothing is read back. */
export async function closeMeasured(transaction: Transaction, { stepId, measured, now }: { stepId: string; measured: Measured; now: Date }): Promise<ClosedPhase | undefined> {
  const phase = await row<PhaseRow>(PHASE, [stepId, null], transaction);
  return phase && close(transaction, phase, measured, now);
}

type ValuesIf = { stepId: string; fitRunId?: string; /** Repeats that people would have left out. */ excluded: ReadonlySet<number> };

/** The repeats of a phase, closed or under way, and what its value would be with these left out; changes nothing. Undefined for a step without a phase. */
export async function valuesIf({ stepId, fitRunId, excluded }: ValuesIf): Promise<{ columns: PhaseColumns; values: PhaseSummaryValues } | undefined> {
  const phase = await row<PhaseRow>(PHASE, [stepId, fitRunId ?? null]);
  if (!phase) return undefined;
  const { columns, qStd } = await readColumns(undefined, phase);
  markLeftOut(columns, { discard: phase.discard, excluded });
  const summary = summarise(columns, { qStd, medianR1: await medianR1(undefined, phase) });
  return { columns, values: isWithoutValue(phase, summary) ? withoutValue(summary) : summary };
}

async function close(transaction: Transaction, phase: PhaseRow, { columns, pressurePa, qStd }: Measured, now: Date): Promise<ClosedPhase> {
  const excluded = await rows<{ idx: number }>(`select idx from exclusion where step_id = $1 and undone_at is null`, [phase.stepId], transaction);
  markLeftOut(columns, { discard: phase.discard, excluded: new Set(excluded.map(({ idx }) => idx)) });
  const summary = summarise(columns, { qStd, medianR1: await medianR1(transaction, phase) });
  const values = isWithoutValue(phase, summary) ? withoutValue(summary) : summary;
  await writeSummary(transaction, phase, columns, values, pressurePa, now);
  return { ...phase, columns, values };
}

/** A phase that was given up, or whose sweeps lost the resonance, keeps its readings and has no value. */
const isWithoutValue = ({ givenUp, tracked }: PhaseRow, { n, unusable }: PhaseSummaryValues): boolean => givenUp || (tracked && unusable * 2 > n);

const NO_VALUE = { n: 0, mean: NaN, sd: NaN, u: NaN, r1: NaN };

const withoutValue = (summary: PhaseSummaryValues): PhaseSummaryValues => ({ ...summary, nUsed: 0, f0: NO_VALUE, q: NO_VALUE });

type ReadingRow = Repeat & { pressurePa: number | null; qStd: number | null };

async function readColumns(transaction: Transaction | undefined, { stepId, fitRunId }: PhaseRow): Promise<Measured> {
  const readings = await rows<ReadingRow>(
    `select r.idx, r.at, r.temperature_c as "temperatureC", r.pressure_pa as "pressurePa", f.f0_hz as "f0Hz", f.q, f.f0_std_hz as "f0StdHz", f.q_std as "qStd",
            coalesce(f.flags, r.flags) as flags
       from reading r left join lateral (select * from fit where fit_run_id = $2 and step_id = $1 and idx = r.idx offset 0) f on true
      where r.step_id = $1 order by r.idx`,
    [stepId, fitRunId],
    transaction,
  );
  const pressures = readings.flatMap(({ pressurePa }) => pressurePa ?? []);
  const pressurePa = pressures.length > 0 ? pressures.reduce((sum, pressure) => sum + pressure, 0) / pressures.length : null;
  return { columns: columnsOf(readings), pressurePa, qStd: Float64Array.from(readings, ({ qStd }) => qStd ?? NaN) };
}

/** Median lag-1 autocorrelation of this medium's earlier phases in the campaign: the floor for short phases. */
async function medianR1(transaction: Transaction | undefined, { campaignId, medium, sequence, fitRunId }: PhaseRow) {
  const median = await row<{ f0: number | null; q: number | null }>(
    `select percentile_cont(0.5) within group (order by s.f0_r1) as f0, percentile_cont(0.5) within group (order by s.q_r1) as q
       from phase p join phase_summary s on s.phase_id = p.id and s.fit_run_id = $4
      where p.campaign_id = $1 and p.medium = $2 and p.sequence < $3 and s.n_used > 2`,
    [campaignId, medium, sequence, fitRunId],
    transaction,
  );
  return median?.f0 == null || median.q == null ? undefined : { f0: median.f0, q: median.q };
}

async function writeSummary(
  transaction: Transaction,
  { phaseId, fitRunId, campaignId }: PhaseRow,
  columns: PhaseColumns,
  { n, nUsed, unusable, f0, q, temperatureC, flagCounts }: PhaseSummaryValues,
  pressurePa: number | null,
  now: Date,
) {
  const number = (value: number) => (Number.isFinite(value) ? value : null);
  await change(
    `insert into phase_summary (phase_id, fit_run_id, n, n_used, unusable, f0_mean, f0_sd, f0_u, f0_r1, q_mean, q_sd, q_u, q_r1,
       temperature_mean, temperature_sd, pressure_mean, flag_counts, columns, made_at)
     values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, $17, $18, $19)
     on conflict (phase_id, fit_run_id) do update set n = excluded.n, n_used = excluded.n_used, unusable = excluded.unusable,
       f0_mean = excluded.f0_mean, f0_sd = excluded.f0_sd, f0_u = excluded.f0_u, f0_r1 = excluded.f0_r1, q_mean = excluded.q_mean,
       q_sd = excluded.q_sd, q_u = excluded.q_u, q_r1 = excluded.q_r1, temperature_mean = excluded.temperature_mean,
       temperature_sd = excluded.temperature_sd, pressure_mean = excluded.pressure_mean, flag_counts = excluded.flag_counts,
       columns = excluded.columns, made_at = excluded.made_at`,
    [
      phaseId,
      fitRunId,
      n,
      nUsed,
      unusable,
      number(f0.mean),
      number(f0.sd),
      number(f0.u),
      number(f0.r1),
      number(q.mean),
      number(q.sd),
      number(q.u),
      number(q.r1),
      number(temperatureC.mean),
      number(temperatureC.sd),
      pressurePa,
      JSON.stringify(flagCounts),
      encodeColumns(columns),
      now,
    ],
    transaction,
  );
  await writeLevels(transaction, { phaseId, fitRunId }, columns);
  await notify(`phases:${campaignId}`, transaction);
  await change(
    `update phase set closed_at = coalesce(closed_at, $2), started_at = coalesce($3, started_at), ended_at = coalesce($4, ended_at) where id = $1`,
    [phaseId, now, columns.n > 0 ? new Date(columns.at[0]) : null, columns.n > 0 ? new Date(columns.at[columns.n - 1]) : null],
    transaction,
  );
}
