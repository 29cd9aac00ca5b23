import { demandExists } from "@/lib/demand-exists";
import { row, rows } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import type { Comparison, FitRunAnswer } from "@/lib/fit-runs/schema";
import type { FitSettings, FoundOnRefit } from "@/models/json";

type Found = Omit<FitRunAnswer, "createdAt" | "finishedAt" | "found" | "settings"> & { createdAt: Date; finishedAt: Date | null; found: FoundOnRefit[]; settings: FitSettings };

const RUNS = `
  select f.id, f.campaign_id as "campaignId", f.current, f.state, f.settings, f.code_version as "codeVersion", f.why, p.name as by,
         f.created_at as "createdAt", f.finished_at as "finishedAt", f.found,
         case when f.created_by is null then stored.n else f.total end as total, case when f.created_by is null then stored.n else f.done end as done
    from fit_run f left join person p on p.id = f.created_by
   cross join lateral (select coalesce(sum(stored), 0)::int as n from step where campaign_id = f.campaign_id and kind = 'measure' and role <> 'find') stored`;

const present = ({ createdAt, finishedAt, found, ...run }: Found): FitRunAnswer => ({
  ...run,
  createdAt: createdAt.toISOString(),
  finishedAt: finishedAt?.toISOString() ?? null,
  found: found.map(({ limitId, kind, cycle, text }) => ({ limitId, kind, cycle, text })),
});

/** The fit runs of a campaign, the newest first. @throws AppError 404. */
export async function findFitRuns({ campaignId }: { campaignId: string }): Promise<{ items: FitRunAnswer[] }> {
  const found = await rows<Found>(`${RUNS} where f.campaign_id = $1 order by f.id desc`, [campaignId]);
  if (found.length === 0) await demandExists("campaign", campaignId);
  return { items: found.map(present) };
}

/** @throws AppError 404. */
export async function readFitRun({ fitRunId }: { fitRunId: string }): Promise<FitRunAnswer> {
  const found = await row<Found>(`${RUNS} where f.id = $1`, [fitRunId]);
  if (!found) throw notFound("fit run");
  return present(found);
}

type Side = { nUsed: number; f0Mean: number | null; f0U: number | null; qMean: number | null; qU: number | null; flags: Record<string, number> };
type Pair = { phaseId: string; sequence: number; cycle: number; medium: string; role: string; startedAt: Date | null; ours: Side; theirs: Side };

/** Phase values of two runs of one campaign beside each other; phases that both have. @throws AppError 404, 409 for runs of two campaigns. */
export async function compareFitRuns({ fitRunId, with: other }: { fitRunId: string; with?: string }): Promise<Comparison> {
  const ours = await row<{ campaignId: string }>(`select campaign_id as "campaignId" from fit_run where id = $1`, [fitRunId]);
  if (!ours) throw notFound("fit run");
  const theirs = await row<{ id: string; campaignId: string }>(
    `select id, campaign_id as "campaignId" from fit_run where case when $2::bigint is null then campaign_id = $1 and current else id = $2 end`,
    [ours.campaignId, other ?? null],
  );
  if (!theirs) throw notFound("fit run to compare with");
  if (theirs.campaignId !== ours.campaignId) throw conflict("The two fit runs belong to two campaigns");
  const side = (name: string) =>
    `jsonb_build_object('nUsed', ${name}.n_used, 'f0Mean', ${name}.f0_mean, 'f0U', ${name}.f0_u, 'qMean', ${name}.q_mean, 'qU', ${name}.q_u, 'flags', ${name}.flag_counts)`;
  const pairs = await rows<Pair>(
    `select p.id as "phaseId", p.sequence, p.cycle, p.medium, p.role, p.started_at as "startedAt", ${side("a")} as ours, ${side("b")} as theirs
       from phase p join phase_summary a on a.phase_id = p.id and a.fit_run_id = $2 join phase_summary b on b.phase_id = p.id and b.fit_run_id = $3
      where p.campaign_id = $1 order by p.sequence`,
    [ours.campaignId, fitRunId, theirs.id],
  );
  return {
    fitRunId,
    withFitRunId: theirs.id,
    phases: pairs.map(({ startedAt, ours: mine, theirs: yours, ...phase }) => ({ ...phase, startedAt: startedAt?.toISOString() ?? null, ours: presentSide(mine), theirs: presentSide(yours) })),
    changes: changesOf(pairs),
  };
}

const presentSide = ({ nUsed, f0Mean, f0U, qMean, qU, flags }: Side): Comparison["phases"][number]["ours"] => ({ nUsed, f0: { mean: f0Mean, u: f0U }, q: { mean: qMean, u: qU }, flags });

function changesOf(pairs: readonly Pair[]): Comparison["changes"] {
  const valued = pairs.filter(({ ours, theirs }) => ours.f0Mean !== null && theirs.f0Mean !== null && ours.qMean !== null && theirs.qMean !== null);
  return [...new Set(valued.map(({ medium }) => medium))].map((medium) => {
    const list = valued.filter((pair) => pair.medium === medium);
    const f0 = spread(list.map(({ ours, theirs }) => ((ours.f0Mean as number) / (theirs.f0Mean as number) - 1) * 1e6));
    const q = spread(list.map(({ ours, theirs }) => ((ours.qMean as number) / (theirs.qMean as number) - 1) * 100));
    return { medium, n: list.length, f0Ppm: f0.mean, f0PpmSd: f0.sd, qPercent: q.mean, qPercentSd: q.sd };
  });
}

function spread(values: readonly number[]): { mean: number; sd: number | null } {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
  return { mean, sd: values.length > 1 ? Math.sqrt(squares / (values.length - 1)) : null };
}
