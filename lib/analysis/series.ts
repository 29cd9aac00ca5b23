import { bucketRuns } from "@/lib/analysis/bucket-runs";
import { loadBuckets } from "@/lib/analysis/load-buckets";
import type { SeriesAnswer, SeriesQuery } from "@/lib/analysis/schema";
import { findFitRun, selectPhases } from "@/lib/analysis/select-phases";
import { countOf } from "@/lib/phases/buckets";

const UNIT = { f0: "Hz", q: "1", temperature: "°C" } as const;

/** A campaign's repeats for a plot: at most `points` buckets, none across two phases while there are fewer phases than buckets; no extreme is dropped. */
export async function readSeries(campaignId: string, query: SeriesQuery): Promise<SeriesAnswer> {
  const { quantity, points, from, to } = query;
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  if (!fitRunId) return { unit: UNIT[quantity], n: 0, leftOut: 0, buckets: [] };
  const phases = await selectPhases(campaignId, fitRunId, query);
  const loaded = await loadBuckets(phases, { fitRunId, quantity, points, from, to });

  const runs = loaded.filter(({ buckets }) => buckets.count.length > 0).map(({ phase: { phaseId, cycle }, buckets }) => ({ key: { phaseId, cycle }, buckets }));
  const buckets = bucketRuns(runs, points).map(({ key, from: start, to: end, ...rest }) => ({
    from: new Date(start).toISOString(),
    to: new Date(end).toISOString(),
    ...rest,
    ...key,
  }));
  return {
    unit: UNIT[quantity],
    n: runs.reduce((sum, run) => sum + countOf(run.buckets), 0),
    leftOut: loaded.reduce((sum, { leftOut }) => sum + leftOut, 0),
    buckets,
  };
}
