import { heavy } from "@/lib/analysis/heavy";
import { offLoop } from "@/lib/analysis/off-loop";
import { resultOf } from "@/lib/analysis/results";
import type { DriftAnswer, DriftQuery } from "@/lib/analysis/schema";
import { findFitRun, selectPhases, type SelectedPhase } from "@/lib/analysis/select-phases";
import { impossible } from "@/lib/errors";

const DAY_MS = 86_400_000;
/** Phase values whose line is found in a few milliseconds here; more go to another process. */
const MOST_HERE = 30;

/**
 * Drift of phase values: the slope with an uncertainty that holds under correlated noise, the ordinary and the robust one
 * beside it. A line belongs to one mount: the named one, else the newest; `values` holds those of the others as well.
 */
export async function readDrift(campaignId: string, query: DriftQuery, { background = false } = {}): Promise<DriftAnswer> {
  if (query.compensate === "temperature") throw impossible("Temperature compensation is not available for this campaign yet", { errors: [{ path: "compensate", message: "only none" }] });
  const fitRunId = await findFitRun(campaignId, query.fitRunId);
  const phases = fitRunId ? await selectPhases(campaignId, fitRunId, { ...query, medium: query.medium ?? "air" }) : [];
  const closed = phases.filter((phase) => phase.closed);
  if (!fitRunId || closed.length === 0) return driftOf([], query);
  return resultOf({ campaignId, question: { kind: "drift", query }, fitRunId, phases: closed, background, compute: () => driftOf(closed, query) });
}

async function driftOf(phases: readonly SelectedPhase[], { quantity }: DriftQuery): Promise<DriftAnswer> {
  const unit = quantity === "f0" ? "Hz" : "1";
  const values = phases.flatMap(({ role, startedAt, f0Mean, f0U, qMean, qU, cycle, phaseId, mountId }) => {
    const value = quantity === "f0" ? f0Mean : qMean;
    if (role === "check" || value === null || !startedAt) return [];
    return [{ at: startedAt, value, u: quantity === "f0" ? f0U : qU, cycle, phaseId, mountId }];
  });
  const shown = values.map(({ at, mountId: _mountId, ...rest }) => ({ at: at.toISOString(), ...rest }));
  const ofMount = values.filter(({ mountId }) => mountId === values[values.length - 1].mountId);
  const rising = ofMount.filter(({ at }, i) => i === 0 || at > ofMount[i - 1].at);
  const first = rising[0]?.at;
  const input = {
    atDays: Float64Array.from(rising, ({ at }) => (at.getTime() - first.getTime()) / DAY_MS),
    values: Float64Array.from(rising, ({ value }) => value),
  };
  const line = rising.length <= MOST_HERE ? heavy.drift(input) : await offLoop("drift", input);
  const newest = ofMount.length < values.length ? ` of the newest mount, ${values.length - ofMount.length} before it left out` : "";
  const used = `${rising.length} phase values${newest}${rising.length < 3 ? "; at least three are needed" : ""}`;
  const common = { unit, n: rising.length, steps: [], values: shown, used };
  if (!line) {
    return { ...common, slopePerDay: null, u: null, ppmPerDay: null, lower: null, upper: null, intercept: null, from: null, to: null, leastSquares: null, theilSen: null };
  }
  const mean = rising.reduce((sum, { value }) => sum + value, 0) / rising.length;
  const { slopePerDay, u, lower, upper, intercept, leastSquares, theilSen } = line;
  return {
    ...common,
    slopePerDay,
    u,
    ppmPerDay: (slopePerDay / mean) * 1e6,
    lower,
    upper,
    intercept,
    from: rising[0].at.toISOString(),
    to: rising[rising.length - 1].at.toISOString(),
    leastSquares: { slopePerDay: leastSquares.slopePerDay, u: leastSquares.u, lower: leastSquares.lower, upper: leastSquares.upper },
    theilSen: { slopePerDay: theilSen.slopePerDay, lower: theilSen.lower, upper: theilSen.upper },
  };
}
