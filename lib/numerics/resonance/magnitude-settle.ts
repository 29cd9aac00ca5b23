import { descendShape } from "@/lib/numerics/resonance/magnitude-descend";
import { emptyMagnitudeModel, type MagnitudeModel, type Shape } from "@/lib/numerics/resonance/magnitude-model";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";

/** Rounds in which noise and weights are found anew, until the noise moves by less than SAME_NOISE. */
const MOST_ROUNDS = 10;
const SAME_NOISE = 1e-3;
/** A step that promises less than this share of a variance ends a round: the first, and the others. */
const SMALL_AT_FIRST = 1e-2;
const SMALL = 1e-6;
/** Least weight-giving power against the mean, for data without noise. */
const LEAST_POWER = 1e-9;
/** Residuals this small against the data are rounding and say nothing. */
const ROUNDING = 2 ** -44;

export type MagnitudeSolution = Shape & {
  model: MagnitudeModel;
  weight: Float64Array;
  /** Noise of each quadrature. */
  sigma: number;
  /** Twice the negative logarithm of the quasi-likelihood, less a constant: the smaller the better. */
  score: number;
  /** Lag-1 autocorrelation of the weighted residuals in order of frequency. */
  lag1: number;
  /** What the resonance explains beyond an offset, in variances of a point. */
  explained: number;
  settled: boolean;
  evaluations: number;
};

/** Weights to begin with: inverse to the power averaged over five points. */
export function firstWeights({ n, power, energy }: MagnitudeSweep): Float64Array {
  const least = (1e-3 * energy) / n;
  const weight = new Float64Array(n);
  for (let i = 0; i < n; i++) {
    const from = Math.max(0, i - 2);
    const to = Math.min(n - 1, i + 2);
    let sum = 0;
    for (let k = from; k <= to; k++) sum += power[k];
    weight[i] = 1 / (sum / (to - from + 1) + least);
  }
  return weight;
}

/**
 * Weights 1/(|z|² + σ²) from the mean |z|² + 2σ² of each point: the variance of |z + noise|² is 4σ²(|z|² + σ²).
 */
export function weightsOf({ n, energy }: MagnitudeSweep, mean: Float64Array, sigma: number, weight: Float64Array): void {
  const noise = sigma * sigma;
  const least = Math.max(noise, (LEAST_POWER * energy) / n);
  for (let i = 0; i < n; i++) weight[i] = 1 / Math.max(mean[i] - noise, least);
}

/** Noise of each quadrature from the weighted sum of squares. */
export function noiseOf({ n, withSlope }: MagnitudeSweep, cost: number): number {
  return Math.sqrt(cost / (4 * (n - (withSlope ? 7 : 5))));
}

export function scoreOf({ n }: MagnitudeSweep, weight: Float64Array, sigma: number): number {
  let score = 2 * n * Math.log(Math.max(sigma, Number.MIN_VALUE));
  for (let i = 0; i < n; i++) score -= Math.log(weight[i]);
  return score;
}

export function weightedLag1({ n, energy }: MagnitudeSweep, residual: Float64Array, weight: Float64Array): number {
  let products = 0, squares = 0, last = 0, plain = 0;
  for (let i = 0; i < n; i++) {
    const r = Math.sqrt(weight[i]) * residual[i];
    squares += r * r;
    products += r * last;
    last = r;
    plain += residual[i] * residual[i];
  }
  return Math.sqrt(plain * n) > ROUNDING * energy ? products / squares : 0;
}

/** The shape from a first guess, noise and weights settled with it. */
export function settleShape(p: MagnitudeSweep, start: Shape, first: Float64Array): MagnitudeSolution {
  const models: [MagnitudeModel, MagnitudeModel] = [emptyMagnitudeModel(p.n), emptyMagnitudeModel(p.n)];
  const weight = first.slice();
  let end = descendShape(p, start, { weight, free: 2, small: SMALL_AT_FIRST }, models);
  let { evaluations } = end;
  let sigma = noiseOf(p, models[0].cost);
  let { settled } = end;
  for (let round = 0; settled && round < MOST_ROUNDS; round++) {
    weightsOf(p, models[0].mean, sigma, weight);
    end = descendShape(p, end, { weight, free: 2, small: SMALL }, models);
    evaluations += end.evaluations;
    settled = end.settled;
    const last = sigma;
    sigma = noiseOf(p, models[0].cost);
    if (Math.abs(sigma - last) <= SAME_NOISE * last) break;
  }
  const [model] = models;
  return {
    f0: end.f0, q: end.q, bend: 0, model, weight, sigma, settled, evaluations,
    score: scoreOf(p, weight, sigma), lag1: weightedLag1(p, model.residual, weight), explained: settled ? explainedOf(p, model, weight, sigma) : 0,
  };
}

const gram = new Float64Array(9);
const right = new Float64Array(3);

function explainedOf({ n, s, withSlope }: MagnitudeSweep, model: MagnitudeModel, weight: Float64Array, sigma: number): number {
  gram.fill(0);
  right.fill(0);
  let total = 0;
  for (let i = 0; i < n; i++) {
    const t = s[i];
    const w = weight[i];
    const r = model.residual[i] + (model.mean[i] - model.linear[2]); // less a constant, for the digits
    total += w * r * r;
    gram[0] += w;
    gram[3] += w * t;
    gram[4] += w * t * t;
    gram[7] += w * t * t * t;
    gram[8] += w * t * t * t * t;
    right[0] += w * r;
    right[1] += w * r * t;
    right[2] += w * r * t * t;
  }
  gram[6] = gram[4];
  if (!withSlope) gram[4] = gram[8] = 1;
  const sums = right.slice();
  if (!solveCholesky(gram, right, 3)) return 0;
  const alone = total - sums[0] * right[0] - sums[1] * right[1] - sums[2] * right[2];
  return sigma > 0 ? (alone - model.cost) / (4 * sigma * sigma) : alone > 0 ? Infinity : 0;
}
