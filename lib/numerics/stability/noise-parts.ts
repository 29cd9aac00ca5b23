import { regression } from "@/lib/numerics/statistics/regression";

/** Allan variance of each part over τ, for coefficient 1: h₀/2τ, 2 ln 2 h₋₁, (2π²/3) τ h₋₂, D² τ²/2. */
const shapes: readonly ((tauS: number) => number)[] = [
  (tauS) => 1 / (2 * tauS),
  () => 2 * Math.LN2,
  (tauS) => ((2 * Math.PI ** 2) / 3) * tauS,
  (tauS) => tauS ** 2 / 2,
];

const curvePoints = 400;

export type NoiseParts = {
  /** Coefficients of S_y(f) = h₀ + h₋₁/f + h₋₂/f², in the unit of the values squared times s, 1 and 1/s. */
  white: number;
  flicker: number;
  randomWalk: number;
  /** Size of a steady drift, in the unit of the values per second. */
  driftPerS: number;
  /** Where the fitted curve is least within the averaging times given, and its deviation there. */
  best: { tauS: number; deviation: number };
};

/**
 * Parts of an Allan deviation curve: white, flicker and random-walk noise and a steady drift, none below nothing, and
 * the averaging time of least deviation.
 *
 *   σ²(τ) = h₀/2τ + 2 ln 2 h₋₁ + (2π²/3) τ h₋₂ + D² τ²/2
 *
 * Least squares relative to the standard deviation of each point, σ² √(2/edf), over every set of parts; of those
 * without a negative coefficient the best counts. Points of one series are correlated, so no errors are given.
 *
 * @param points Of an Allan or overlapping Allan deviation, rising τ in seconds; points without deviation are passed over.
 * @returns Undefined below two points with a deviation above 0.
 * @throws RangeError if a τ or edf is not above 0.
 *
 * Source: coefficients as in IEEE Std 1139-2008 and NIST SP 1065 (2008); the fit is our choice.
 */
export function noiseParts(points: readonly { tauS: number; deviation: number; edf: number }[]): NoiseParts | undefined {
  const used = points.filter(({ deviation }) => deviation > 0);
  if (used.some(({ tauS, edf }) => !(tauS > 0 && edf > 0))) throw new RangeError("τ and edf must be above 0");
  if (used.length < 2) return undefined;

  const target = Float64Array.from(used, ({ edf }) => Math.sqrt(edf / 2));
  const columns = shapes.map((shape) =>
    Float64Array.from(used, ({ tauS, deviation }, i) => (shape(tauS) * target[i]) / deviation ** 2),
  );
  const coefficients = leastWithoutNegative(columns, target);
  const [white, flicker, randomWalk, driftSquared] = coefficients;
  return { white, flicker, randomWalk, driftPerS: Math.sqrt(driftSquared), best: leastDeviation(coefficients, used) };
}

/** All sets of columns are tried: there are fifteen. */
function leastWithoutNegative(columns: readonly Float64Array[], y: Float64Array): number[] {
  let least = Infinity;
  let best: number[] = columns.map(() => 0);
  for (let set = 1; set < 2 ** columns.length; set++) {
    const chosen = columns.map((_, j) => j).filter((j) => (set >> j) % 2 === 1);
    if (chosen.length > y.length) continue;
    const fit = regression({ columns: chosen.map((j) => columns[j]), y });
    if (fit.residualSumOfSquares >= least || fit.coefficients.some((value) => value < 0)) continue;
    least = fit.residualSumOfSquares;
    best = columns.map((_, j) => (chosen.includes(j) ? fit.coefficients[chosen.indexOf(j)] : 0));
  }
  return best;
}

function leastDeviation(
  coefficients: readonly number[],
  points: readonly { tauS: number }[],
): { tauS: number; deviation: number } {
  const [first, last] = [points[0].tauS, points[points.length - 1].tauS];
  let best = { tauS: first, deviation: Infinity };
  for (let i = 0; i <= curvePoints; i++) {
    const tauS = first * (last / first) ** (i / curvePoints);
    const deviation = Math.sqrt(shapes.reduce((sum, shape, j) => sum + coefficients[j] * shape(tauS), 0));
    if (deviation < best.deviation) best = { tauS, deviation };
  }
  return best;
}
