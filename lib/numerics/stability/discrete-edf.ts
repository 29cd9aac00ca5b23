import type { Alpha } from "@/lib/numerics/stability/power-law";
import type { StatisticShape } from "@/lib/numerics/stability/statistic-shape";

/** (differences + 1) m up to which the lags are summed one by one. */
export const longestTerm = 100;

/**
 * Equivalent degrees of freedom of a stability variance for discrete power-law noise, from the exact covariance of
 * its terms:
 *
 *   edf = n r₀² / ( r₀² + 2 Σ_k (1 − k/n) r_k² )
 *
 * r_k is the covariance of two terms k apart. The phase is white noise integrated 1 − α/2 times (fractionally for
 * flicker), its values taken at points, as repeats are; Greenhall and Riley's algorithm averages them over τ₀ and is
 * 17 % high (white FM) or 24 % low (random walk FM) at m = 1. Lags are summed to twice the length of a term, where
 * what remains is nothing (white, random walk) or below 0.2 % (flicker).
 *
 * @param alpha Exponent of the noise; for Allan statistics not below −2.
 * @param m Averaging factor, a whole number ≥ 1, up to 100/(differences + 1).
 * @returns edf of a stretch by its number of values, which must be enough for one term.
 * @throws RangeError for a noise the statistic does not converge for, too large an m, or a stretch without a term.
 *
 * Source: edf as the ratio 2 E²/var of a quadratic form; covariances of fractionally integrated noise from J. R. M.
 * Hosking, Fractional differencing, Biometrika 68 (1981) 165, with the logarithmic limit at half-integer order.
 */
export function discreteEdf(
  shape: StatisticShape,
  { alpha, m }: { alpha: Alpha; m: number },
): (values: number) => number {
  if (alpha + 2 * shape.differences <= 1) throw new RangeError("the Allan statistics do not converge for this noise");
  if ((shape.differences + 1) * m > longestTerm) throw new RangeError(`averaging factor ${m} is too large`);
  // Averaging phase over m is one more integration followed by one more difference of span m.
  const differences = shape.differences + (shape.averaged ? 1 : 0);
  const integrations = 1 - alpha / 2 + (shape.averaged ? 1 : 0);
  const step = shape.overlapping ? 1 : m; // from one term to the next
  const span = m / step;

  const lags = 2 * (shape.differences + 1) * span;
  const phase = new Float64Array(lags + differences * span + 1);
  for (let k = 0; k < phase.length; k++) phase[k] = phaseCovariance(k * step, integrations);

  const weights = alternatingBinomials(differences);
  const correlationSquared = new Float64Array(lags + 1);
  let variance = 0;
  for (let k = 0; k <= lags; k++) {
    let covariance = 0;
    for (let i = -differences; i <= differences; i++) {
      covariance += weights[i + differences] * phase[Math.abs(k + i * span)];
    }
    if (k === 0) variance = covariance;
    correlationSquared[k] = (covariance / variance) ** 2;
  }

  return (values) => {
    const n = 1 + Math.floor((values + (shape.averaged ? 1 : 0) - differences * m) / step);
    if (n < 1) throw new RangeError("the stretch is too short for a term");
    let sum = 1;
    for (let k = 1; k < Math.min(n, correlationSquared.length); k++) sum += 2 * (1 - k / n) * correlationSquared[k];
    return n / sum;
  };
}

/** Generalised covariance, to a factor and to what the differences annul, of noise integrated `order` times. */
function phaseCovariance(lag: number, order: number): number {
  if (order === 0) return lag === 0 ? 1 : 0;
  const halfInteger = order % 1 !== 0;
  let product = halfInteger ? harmonicOfOdd[lag + order - 0.5] + harmonicOfOdd[Math.abs(lag - order + 0.5)] : lag;
  for (let i = halfInteger ? 0.5 : 1; i < order; i++) product *= lag ** 2 - i ** 2;
  return product;
}

/** Digamma at n + 1/2 less its value at 1/2, Σ 2/(2j − 1) over j = 1 … n, for every n that can occur. */
const harmonicOfOdd = new Float64Array(4 * longestTerm);
for (let n = 1; n < harmonicOfOdd.length; n++) harmonicOfOdd[n] = harmonicOfOdd[n - 1] + 2 / (2 * n - 1);

/** Weights of the covariance of two d-th differences: (−1)^i C(2d, d + i) for i = −d … d. */
function alternatingBinomials(d: number): Float64Array {
  const weights = new Float64Array(2 * d + 1);
  weights[0] = d % 2 === 0 ? 1 : -1;
  for (let i = 1; i <= 2 * d; i++) weights[i] = (-weights[i - 1] * (2 * d - i + 1)) / i;
  return weights;
}
