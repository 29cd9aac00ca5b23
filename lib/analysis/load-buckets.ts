import { smallestSize } from "@/lib/analysis/bucket-runs";
import { loadRepeats } from "@/lib/analysis/load-repeats";
import { loadOpenPhase } from "@/lib/analysis/open-phase";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { countOf, decodeBuckets, type Buckets } from "@/lib/phases/buckets";
import { FINER, keptOf, levelFor, type Quantity } from "@/lib/phases/levels";

type Load = { fitRunId: string; quantity: Quantity; points: number; from?: Date; to?: Date };

export type PhaseBuckets = { phase: SelectedPhase; buckets: Buckets; leftOut: number };

/**
 * What a plot of at most `points` buckets needs of each phase within a window of time: of phases that lie in it as a whole the
 * coarsest stored level that is fine enough, of those that its ends cut, and of those too short for a level, the repeats
 * themselves. The phase under way is put together in the database. Phases outside are not read at all.
 */
export async function loadBuckets(phases: readonly SelectedPhase[], { fitRunId, quantity, points, from, to }: Load): Promise<PhaseBuckets[]> {
  const touched = phases.filter((phase) => reach(phase, from, to) !== "outside");
  const size = smallestSize(touched.map(({ n }) => n ?? 0), points);
  const byLevel = new Map<number, SelectedPhase[]>();
  for (const phase of touched) {
    const parts = reach(phase, from, to) === "inside" && phase.n ? levelFor(Math.ceil(phase.n / size), phase.n) : undefined;
    if (parts !== undefined) byLevel.set(parts, (byLevel.get(parts) ?? []).concat(phase));
  }

  const found = new Map<string, PhaseBuckets>();
  for (const [parts, own] of byLevel) {
    const stored = await loadLevel(own, { fitRunId, quantity, parts });
    for (const phase of own) {
      const buckets = stored.get(phase.phaseId);
      if (buckets) found.set(phase.phaseId, { phase, buckets, leftOut: (phase.n ?? 0) - countOf(buckets) });
    }
  }
  for (const phase of touched) if (!phase.closed) found.set(phase.phaseId, { phase, ...(await loadOpenPhase(phase, { fitRunId, quantity, parts: FINER * points, from, to })) });
  const rest = touched.filter(({ phaseId }) => !found.has(phaseId));
  for await (const { phase, repeats } of loadRepeats(rest, { fitRunId, quantity })) {
    const [start, end] = [from?.getTime() ?? -Infinity, to?.getTime() ?? Infinity];
    const within = repeats.at.every((time) => time >= start && time <= end) ? repeats : cut(repeats, start, end);
    const buckets = keptOf(within);
    found.set(phase.phaseId, { phase, buckets, leftOut: within.at.length - buckets.count.length });
  }
  return touched.flatMap(({ phaseId }) => found.get(phaseId) ?? []);
}

/** How a phase lies to the window. Of one under way, or closed by a version that kept no times, nothing is known. */
function reach({ closed, earliestAt, latestAt }: SelectedPhase, from: Date | undefined, to: Date | undefined): "inside" | "outside" | "unknown" {
  if (!closed || !earliestAt || !latestAt) return "unknown";
  if ((from && latestAt < from) || (to && earliestAt > to)) return "outside";
  return (!from || earliestAt >= from) && (!to || latestAt <= to) ? "inside" : "unknown";
}

async function loadLevel(phases: readonly SelectedPhase[], { fitRunId, quantity, parts }: { fitRunId: string; quantity: Quantity; parts: number }): Promise<Map<string, Buckets>> {
  const stored = await rows<{ phaseId: string; buckets: Buffer }>(
    `select phase_id as "phaseId", buckets from phase_level where fit_run_id = $1 and quantity = $2 and parts = $3 and phase_id = any($4)`,
    [fitRunId, quantity, parts, phases.map(({ phaseId }) => phaseId)],
  );
  return new Map(stored.map(({ phaseId, buckets }) => [phaseId, decodeBuckets(buckets)]));
}

function cut({ at, values, leftOut }: { at: Float64Array; values: Float64Array; leftOut: Uint8Array }, start: number, end: number) {
  const inside = (_: number, i: number) => at[i] >= start && at[i] <= end;
  return { at: at.filter(inside), values: values.filter(inside), leftOut: leftOut.filter(inside) };
}
