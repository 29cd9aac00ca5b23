import type { DriftAnswer, DriftQuery } from "@/lib/analysis/schema";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { drift } from "@/lib/numerics/drift/drift";

const DAY_MS = 86_400_000;

/** The line through the values of phases of one medium; `values` holds those of other mounts than the line's as well. */
export function driftOf({ phases, query: { quantity } }: { phases: readonly SelectedPhase[]; query: DriftQuery }): DriftAnswer {
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
  const line = drift(input);
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
