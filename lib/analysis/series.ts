import { bucketRuns } from "@/lib/analysis/bucket-runs";
import type { SeriesAnswer, SeriesQuery } from "@/lib/analysis/schema";
import { findFitRun, loadColumns, selectPhases } from "@/lib/analysis/select-phases";

const UNIT = { f0: "Hz", q: "1", temperature: "°C" } as const;

/** A campaign's repeats for a plot: at most `points` buckets, none across two phases while there are fewer phases than buckets; no extreme is dropped. */
export async function readSeries(campaignId: string, query: SeriesQuery): Promise<SeriesAnswer> {
  const { quantity, points, from, to } = query;
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  if (!fitRunId) return { unit: UNIT[quantity], n: 0, leftOut: 0, buckets: [] };
  const phases = await selectPhases(campaignId, fitRunId, query);
  const columns = await loadColumns(phases, fitRunId);

  let leftOut = 0;
  const runs = phases.flatMap(({ phaseId, cycle }) => {
    const phase = columns.get(phaseId);
    if (!phase) return [];
    const values = quantity === "f0" ? phase.f0Hz : quantity === "q" ? phase.q : phase.temperatureC;
    const at = new Float64Array(phase.n);
    const kept = new Float64Array(phase.n);
    let n = 0;
    for (let i = 0; i < phase.n; i++) {
      if (from && phase.at[i] < from.getTime()) continue;
      if (to && phase.at[i] > to.getTime()) continue;
      if (phase.leftOut[i] || !Number.isFinite(values[i])) {
        leftOut++;
        continue;
      }
      at[n] = phase.at[i];
      kept[n] = values[i];
      n++;
    }
    return n > 0 ? [{ key: { phaseId, cycle }, at: at.subarray(0, n), values: kept.subarray(0, n) }] : [];
  });
  const buckets = bucketRuns(runs, points).map(({ key, from: start, to: end, ...rest }) => ({
    from: new Date(start).toISOString(),
    to: new Date(end).toISOString(),
    ...rest,
    ...key,
  }));
  return { unit: UNIT[quantity], n: runs.reduce((sum, { at }) => sum + at.length, 0), leftOut, buckets };
}
