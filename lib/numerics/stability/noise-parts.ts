import { allanCorrelation } from "@/lib/numerics/stability/allan-correlation";
import { factorise, solve } from "@/lib/numerics/statistics/householder";
import { regression } from "@/lib/numerics/statistics/regression";

/** Allan variance of each part over τ, for coefficient 1: h₀/2τ, 2 ln 2 h₋₁, (2π²/3) τ h₋₂, D² τ²/2. */
const shapes: readonly ((tauS: number) => number)[] = [
  (tauS) => 1 / (2 * tauS),
  () => 2 * Math.LN2,
  (tauS) => ((2 * Math.PI ** 2) / 3) * tauS,
  (tauS) => tauS ** 2 / 2,
];

const curvePoints = 400;

/** Points closer than this ratio of τ say nearly the same. */
const leastRatio = 1.4;

/** Times the weights are taken from the fitted curve, after once from the points. */
const reweightings = 4;

/** Deviations up to this much above the least count as least. */
const asGood = 1.05;

type Parts = { white: number; flicker: number; randomWalk: number; driftPerS: number };

export type NoiseParts = Parts & {
  /** Standard uncertainties of the parts. A part at 0 has that of the part once it is let in. */
  u: Parts;
  /** Where the fitted curve is least within the averaging times given, its deviation there, and the times as good within 5 %. */
  best: { tauS: number; deviation: number; fromS: number; toS: number };
};

type Point = { tauS: number; deviation: number; edf: number };

/**
 * Parts of an Allan deviation curve: coefficients of white, flicker and random-walk noise, S_y(f) = h₀ + h₋₁/f + h₋₂/f², in
 * the unit of the values squared times s, 1 and 1/s, and the size of a steady drift per second, none below nothing; and the
 * averaging time of least deviation.
 *
 *   σ²(τ) = h₀/2τ + 2 ln 2 h₋₁ + (2π²/3) τ h₋₂ + D² τ²/2
 *
 * Least squares relative to the standard deviation of each point, σ² √(2/edf) with σ² of the fitted curve, over every set
 * of parts; of those without a negative coefficient the best counts. The points of one series are correlated: uncertainties
 * follow from that correlation under the noise found, to first order and for the parts found: in long records they may be a
 * third too small for the doubt about which parts there are.
 *
 * @param points Of an Allan or overlapping Allan deviation, rising τ in seconds; points without deviation are passed over,
 *   and of points closer than a ratio of 1.4 the first is taken.
 * @returns Undefined below two points with a deviation above 0.
 * @throws RangeError if a τ or edf is not above 0.
 *
 * Source: coefficients as in IEEE Std 1139-2008 and NIST SP 1065 (2008); the fit is our choice.
 */
export function noiseParts(points: readonly Point[]): NoiseParts | undefined {
  const positive = points.filter(({ deviation }) => deviation > 0);
  if (positive.some(({ tauS, edf }) => !(tauS > 0 && edf > 0))) throw new RangeError("τ and edf must be above 0");
  const used = thinned(positive);
  if (used.length < 2) return undefined;

  let scale = used.map(({ deviation }) => deviation ** 2);
  let coefficients = leastWithoutNegative(used, scale);
  for (let pass = 0; pass < reweightings; pass++) {
    scale = used.map(({ tauS }) => curveAt(coefficients, tauS));
    coefficients = leastWithoutNegative(used, scale);
  }
  const variances = uncertainties(used, scale, coefficients);
  const [white, flicker, randomWalk, driftSquared] = coefficients;
  const [whiteU, flickerU, randomWalkU, driftSquaredU] = variances.map(Math.sqrt);
  const driftPerS = Math.sqrt(driftSquared);
  return {
    white,
    flicker,
    randomWalk,
    driftPerS,
    u: { white: whiteU, flicker: flickerU, randomWalk: randomWalkU, driftPerS: Math.min(driftSquaredU / (2 * driftPerS), Math.sqrt(driftSquaredU)) },
    best: leastDeviation(coefficients, used),
  };
}

function thinned(points: readonly Point[]): Point[] {
  const kept: Point[] = [];
  for (const point of points) if (kept.length === 0 || point.tauS >= leastRatio * kept[kept.length - 1].tauS) kept.push(point);
  return kept;
}

function curveAt(coefficients: readonly number[], tauS: number): number {
  return shapes.reduce((sum, shape, j) => sum + coefficients[j] * shape(tauS), 0);
}

/** Columns and values of the fit, each row in units of its standard deviation. */
function rowsOf(points: readonly Point[], scale: readonly number[]): { columns: Float64Array[]; y: Float64Array } {
  const weight = points.map(({ edf }, i) => Math.sqrt(edf / 2) / scale[i]);
  return {
    columns: shapes.map((shape) => Float64Array.from(points, ({ tauS }, i) => shape(tauS) * weight[i])),
    y: Float64Array.from(points, ({ deviation }, i) => deviation ** 2 * weight[i]),
  };
}

/** All sets of columns are tried: there are fifteen. */
function leastWithoutNegative(points: readonly Point[], scale: readonly number[]): number[] {
  const { columns, y } = rowsOf(points, scale);
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

/** Variance of each coefficient in the set of those found, or found and itself: P R Pᵀ, P the solution's dependence on y. */
function uncertainties(points: readonly Point[], scale: readonly number[], coefficients: readonly number[]): number[] {
  const { columns } = rowsOf(points, scale);
  const [white, flicker, randomWalk] = coefficients;
  // A curve of drift alone has no noise: any shape of correlation will do then.
  const levels = white + flicker + randomWalk > 0 ? { white, flicker, randomWalk } : { white: 1, flicker: 0, randomWalk: 0 };
  const correlation = allanCorrelation(points.map(({ tauS }) => tauS), levels);
  const n = points.length;
  return columns.map((_, wanted) => {
    const chosen = columns.map((__, j) => j).filter((j) => coefficients[j] > 0 || j === wanted);
    if (chosen.length > n) return NaN;
    const lengths = chosen.map((j) => Math.hypot(...columns[j]));
    const factorisation = factorise(chosen.map((j, k) => columns[j].map((value) => value / lengths[k])));
    const place = chosen.indexOf(wanted);
    const dependence = Float64Array.from({ length: n }, (__, i) => solve(factorisation, new Float64Array(n).fill(1, i, i + 1))[place] / lengths[place]);
    let variance = 0;
    for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) variance += dependence[i] * correlation[i * n + j] * dependence[j];
    return Math.max(variance, 0);
  });
}

function leastDeviation(coefficients: readonly number[], points: readonly Point[]): NoiseParts["best"] {
  const [first, last] = [points[0].tauS, points[points.length - 1].tauS];
  const curve = Array.from({ length: curvePoints + 1 }, (_, i) => {
    const tauS = first * (last / first) ** (i / curvePoints);
    return { tauS, deviation: Math.sqrt(curveAt(coefficients, tauS)) };
  });
  const best = curve.reduce((least, point) => (point.deviation < least.deviation ? point : least));
  const good = curve.filter(({ deviation }) => deviation <= asGood * best.deviation);
  return { ...best, fromS: good[0].tauS, toS: good[good.length - 1].tauS };
}
