import type { DriftAnswer, DriftQuery } from "@/lib/analysis/schema";
import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { temperatureOf, type TemperatureOf } from "@/lib/analysis/temperature-of";
import { ageing } from "@/lib/numerics/drift/ageing";
import { blockMeans } from "@/lib/numerics/drift/block-means";
import { drift } from "@/lib/numerics/drift/drift";
import { mannKendall } from "@/lib/numerics/drift/mann-kendall";
import { findSteps } from "@/lib/numerics/drift/steps";
import { compensateTemperature } from "@/lib/numerics/temperature/compensate-temperature";
import { commonU, weightedSumU, type Compensated } from "@/lib/numerics/temperature/compensated";

const DAY_MS = 86_400_000;
/** The trend test goes over all pairs: of more values it takes means of neighbours. */
const MOST_IN_PAIRS = 5000;

type Value = DriftAnswer["values"][number] & { time: Date; mountId: string | null; setPointC: number | null; temperatureU: number | null };

/** The line through the values of phases of one medium; `values` holds those of other mounts than the line's as well. */
export function driftOf({ phases, query: { quantity, compensate } }: { phases: readonly SelectedPhase[]; query: DriftQuery }): DriftAnswer {
  const unit = quantity === "f0" ? "Hz" : "1";
  const measured = valuesOf(phases, quantity);
  const newestMount = measured[measured.length - 1]?.mountId;
  const wanted = compensate === "temperature" ? temperatureOf(withTemperature(measured)) : undefined;
  const { values, compensated } = wanted?.fit ? compensatedOf(measured, wanted) : { values: measured, compensated: undefined };

  const ofMount = values.filter(({ mountId }) => mountId === newestMount);
  const rising = ofMount.filter(({ time }, i) => i === 0 || time > ofMount[i - 1].time);
  const shown = values.map(({ time: _time, mountId: _mountId, setPointC: _setPointC, temperatureU: _temperatureU, ...rest }) => rest);
  const first = rising[0]?.time;
  const atDays = Float64Array.from(rising, ({ time }) => (time.getTime() - first.getTime()) / DAY_MS);
  const y = Float64Array.from(rising, ({ value }) => value);
  const line = drift({ atDays, values: y });
  const newest = ofMount.length < values.length ? ` of the newest mount, ${values.length - ofMount.length} before it left out` : "";
  const used = `${rising.length} phase values${newest}${rising.length < 3 ? "; at least three are needed" : ""}${wanted?.fit ? `, ${wanted.answer.used}` : ""}`;
  const common = { unit, n: rising.length, values: shown, used, ...(wanted && { compensation: wanted.answer }) };
  if (!line) {
    return { ...common, steps: [], slopePerDay: null, u: null, ppmPerDay: null, lower: null, upper: null, intercept: null, from: null, to: null, leastSquares: null, theilSen: null };
  }
  const mean = rising.reduce((sum, { value }) => sum + value, 0) / rising.length;
  const { slopePerDay, intercept, leastSquares, theilSen, alpha } = line;
  const places = compensated && rising.map((value) => values.indexOf(value));
  const u = Math.hypot(line.u, compensated && places ? slopeU(compensated, places, atDays) : 0);
  const widened = u / line.u;
  const trend = mannKendall(y.length > MOST_IN_PAIRS ? blockMeans({ x: atDays, y }, MOST_IN_PAIRS).y : y);
  const law = ageing({ x: atDays, y });
  return {
    ...common,
    slopePerDay,
    u,
    ppmPerDay: (slopePerDay / mean) * 1e6,
    lower: slopePerDay - (slopePerDay - line.lower) * (line.u > 0 ? widened : 1),
    upper: slopePerDay + (line.upper - slopePerDay) * (line.u > 0 ? widened : 1),
    intercept,
    from: rising[0].at,
    to: rising[rising.length - 1].at,
    leastSquares: { slopePerDay: leastSquares.slopePerDay, u: leastSquares.u, lower: leastSquares.lower, upper: leastSquares.upper },
    theilSen: { slopePerDay: theilSen.slopePerDay, lower: theilSen.lower, upper: theilSen.upper },
    alpha,
    mannKendall: trend ? { s: trend.s, z: trend.z, p: trend.p, exactP: trend.exactP ?? null, tau: trend.tau } : null,
    ageing: law ? { a: law.a, b: law.b, tauDays: law.tau, aiccDifference: law.aiccDifference, preferred: law.preferred } : null,
    steps: findSteps({ x: atDays, y }).map(({ at, size, u: sizeU }) => ({ at: new Date(first.getTime() + at * DAY_MS).toISOString(), size, u: sizeU })),
  };
}

function valuesOf(phases: readonly SelectedPhase[], quantity: DriftQuery["quantity"]): Value[] {
  return phases.flatMap(({ role, startedAt, f0Mean, f0U, qMean, qU, cycle, phaseId, sequence, mountId, setPointC, temperatureC, temperatureSd, n }) => {
    const value = quantity === "f0" ? f0Mean : qMean;
    if (role === "check" || value === null || !startedAt) return [];
    const u = quantity === "f0" ? f0U : qU;
    const temperatureU = temperatureSd === null || !n ? null : temperatureSd / Math.sqrt(n);
    return [{ at: startedAt.toISOString(), time: startedAt, value, u, cycle, phaseId, sequence, mountId, setPointC, temperatureC, temperatureU }];
  });
}

/** Values that have a temperature, by rising time; of all mounts, as the coefficient is the sensor's and each mount has a level of its own. */
function withTemperature(values: readonly Value[]) {
  const known = values.flatMap(({ temperatureC, time, ...rest }) => (typeof temperatureC === "number" ? [{ ...rest, at: time, temperatureC }] : []));
  return known.filter(({ at }, i) => i === 0 || at > known[i - 1].at);
}

/** All values that have a temperature, brought to the reference, with what that adds to their uncertainty; the others are left out. */
function compensatedOf(measured: readonly Value[], { fit }: TemperatureOf): { values: Value[]; compensated?: Compensated } {
  if (!fit) return { values: [...measured] };
  const known = measured.filter(({ temperatureC }) => typeof temperatureC === "number");
  const compensated = compensateTemperature({
    values: Float64Array.from(known, ({ value }) => value),
    fit,
    sensorC: Float64Array.from(known, ({ temperatureC }) => temperatureC as number),
    sensorU: Float64Array.from(known, ({ temperatureU }) => temperatureU ?? 0),
  });
  const shared = commonU(compensated);
  const values = known.map((value, i) => ({ ...value, value: compensated.values[i], u: value.u === null ? null : Math.hypot(value.u, compensated.independentU[i]), commonU: shared[i] }));
  return { values, compensated };
}

/** What the common part of a compensation adds to the slope of an ordinary line through the values at `places`. */
function slopeU(compensated: Compensated, places: readonly number[], atDays: Float64Array): number {
  const mean = atDays.reduce((sum, at) => sum + at, 0) / atDays.length;
  const squares = atDays.reduce((sum, at) => sum + (at - mean) ** 2, 0);
  const weights = new Float64Array(compensated.values.length);
  places.forEach((place, i) => (weights[place] = (atDays[i] - mean) / squares));
  return weightedSumU(compensated, weights).common;
}
