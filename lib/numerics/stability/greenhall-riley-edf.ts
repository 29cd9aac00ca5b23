import type { Alpha } from "@/lib/numerics/stability/power-law";
import type { StatisticShape } from "@/lib/numerics/stability/statistic-shape";

/** Longest sum worth taking; beyond it the tabulated limits are as good. */
const longestSum = 100;

/** Coefficients a₀, a₁ of 1/edf = (a₀ − a₁/r)/r for phase averaged over m; columns for 2 and 3 differences. */
const averagedTable: Readonly<Record<Alpha, readonly [Pair | null, Pair]>> = {
  [2]: [[7 / 9, 1 / 2], [22 / 25, 2 / 3]],
  [1]: [[0.997, 0.616], [1.141, 0.843]],
  [0]: [[1.033, 0.607], [1.184, 0.848]],
  [-1]: [[1.048, 0.534], [1.18, 0.816]],
  [-2]: [[1.302, 0.535], [1.175, 0.777]],
  [-3]: [null, [1.194, 0.703]],
  [-4]: [null, [1.489, 0.702]],
};

/** The same for phase as it is. */
const plainTable: Readonly<Record<Alpha, readonly [Pair | null, Pair]>> = {
  [2]: [[35 / 18, 1], [231 / 100, 3 / 2]],
  [1]: [[790, 410], [9950, 6520]],
  [0]: [[2 / 3, 1 / 3], [7 / 9, 1 / 2]],
  [-1]: [[0.852, 0.375], [0.997, 0.617]],
  [-2]: [[1.079, 0.368], [1.033, 0.607]],
  [-3]: [null, [1.053, 0.553]],
  [-4]: [null, [1.302, 0.535]],
};

/** Coefficients b₀, b₁ of the flicker PM variance b₀ + b₁ ln m. */
const flickerPmTable: readonly [Pair, Pair] = [[15.23, 12], [47.8, 40]];

type Pair = readonly [number, number];

/**
 * Equivalent degrees of freedom of a stability variance by the combined algorithm of Greenhall and Riley: the
 * variance of its terms' average under a power-law phase noise averaged over τ₀, with limits for long sums.
 *
 * @param alpha Exponent of the noise; for Allan statistics not below −2.
 * @param m Averaging factor, a whole number ≥ 1.
 * @returns edf of a stretch by its number of values (phase points less one), which must be enough for one term. Good
 *   to a few percent except at m = 1 and 2: the readings are not averaged phase, see `discreteEdf`.
 * @throws RangeError for a noise the statistic does not converge for, or a stretch without a term.
 *
 * Source: C. A. Greenhall and W. J. Riley, Uncertainty of stability variances based on finite differences, 35th PTTI
 * meeting (2003); restated in NIST SP 1065 (2008).
 */
export function greenhallRileyEdf(
  shape: StatisticShape,
  { alpha, m }: { alpha: Alpha; m: number },
): (values: number) => number {
  const column = shape.differences === 2 ? 0 : 1;
  const limits = (shape.averaged ? averagedTable : plainTable)[alpha][column];
  if (!limits) throw new RangeError("the Allan statistics do not converge for this noise");
  return (values) => edfOfStretch(shape, { alpha, m, values, limits, phaseLimits: flickerPmTable[column] });
}

function edfOfStretch(
  { differences: d, averaged, overlapping }: StatisticShape,
  { alpha, m, values, limits, phaseLimits }: { alpha: Alpha; m: number; values: number; limits: Pair; phaseLimits: Pair },
): number {
  const [a0, a1] = limits;
  const stride = overlapping ? m : 1; // S: terms per averaging time
  const span = (averaged ? m : 1) + m * d;
  const terms = 1 + Math.floor((stride * (values + 1 - span)) / m);
  if (terms < 1) throw new RangeError("the stretch is too short for a term");

  const lags = Math.min(terms, (d + 1) * stride);
  const r = terms / stride;
  const model = { alpha, d };
  const sum = (terms: number, stride: number, filter: number) =>
    basicSum(model, { lags: Math.min(lags, longestSum), terms, stride, filter }) /
    (terms * phaseDifferenceCovariance(0, filter, model) ** 2);
  const shortened = longestSum / r;

  if (averaged || alpha <= 0) {
    const limit = averaged ? 1 : Infinity;
    if (lags <= longestSum) return 1 / sum(terms, stride, averaged || m * (d + 1) > longestSum ? limit : m);
    return 1 / (r >= d + 1 ? (a0 - a1 / r) / r : sum(longestSum, shortened, limit));
  }
  if (alpha === 1) {
    if (lags <= longestSum) return 1 / sum(terms, stride, m);
    const [b0, b1] = phaseLimits;
    const variance = b0 + b1 * Math.log(m);
    if (r >= d + 1) return (r * variance ** 2) / (a0 - a1 / r);
    const sums = { lags: longestSum, terms: longestSum, stride: shortened, filter: shortened };
    return (longestSum * variance ** 2) / basicSum(model, sums);
  }
  return whitePmEdf({ d, r, terms, a0, a1 });
}

function whitePmEdf({ d, r, terms, a0, a1 }: { d: number; r: number; terms: number; a0: number; a1: number }): number {
  const whole = Math.ceil(r);
  if (whole > d) return terms / (a0 - a1 / r);
  let sum = 0;
  for (let k = 1; k < whole; k++) sum += (1 - k / r) * binomial(2 * d, d - k) ** 2;
  return terms / (1 + (2 * sum) / binomial(2 * d, d) ** 2);
}

type Model = { alpha: Alpha; d: number };

/** Sum over lags of squared covariances of the terms, without the 1/terms of their average. */
function basicSum(
  model: Model,
  { lags, terms, stride, filter }: { lags: number; terms: number; stride: number; filter: number },
): number {
  const covariance = (lag: number) => phaseDifferenceCovariance(lag / stride, filter, model);
  let sum = covariance(0) ** 2 + (1 - lags / terms) * covariance(lags) ** 2;
  for (let j = 1; j < lags; j++) sum += 2 * (1 - j / terms) * covariance(j) ** 2;
  return sum;
}

/** Covariance of two d-th differences of the phase, t averaging times apart. */
function phaseDifferenceCovariance(t: number, filter: number, { alpha, d }: Model): number {
  let sum = binomial(2 * d, d) * phaseCovariance(t, filter, alpha);
  for (let i = 1; i <= d; i++) {
    const sign = i % 2 === 1 ? -1 : 1;
    sum += sign * binomial(2 * d, d - i) * (phaseCovariance(t - i, filter, alpha) + phaseCovariance(t + i, filter, alpha));
  }
  return sum;
}

function phaseCovariance(t: number, filter: number, alpha: Alpha): number {
  if (filter === Infinity) return generalisedCovariance(t, alpha + 2);
  const step = 1 / filter;
  return (
    filter ** 2 *
    (2 * generalisedCovariance(t, alpha) - generalisedCovariance(t - step, alpha) - generalisedCovariance(t + step, alpha))
  );
}

/** Generalised covariance of the integral of phase, ∓|t|^(3−α), with a logarithm where that power is even. */
function generalisedCovariance(t: number, alpha: number): number {
  const size = Math.abs(t);
  if (size === 0) return 0;
  const power = 3 - alpha;
  return power % 2 === 0 ? size ** power * Math.log(size) : size ** power;
}

function binomial(n: number, k: number): number {
  let product = 1;
  for (let i = 1; i <= k; i++) product = (product * (n - k + i)) / i;
  return product;
}
