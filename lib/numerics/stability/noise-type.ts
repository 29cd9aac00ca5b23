import type { Alpha } from "@/lib/numerics/stability/power-law";

/** Fewer averages than this in a stretch say too little about the noise. */
export const fewestAverages = 30;

export type IdentifiedNoise = {
  alpha: Alpha;
  /** Lag-1 autocorrelation of the series after `differences` differences. */
  r1: number;
  /** r1/(1 + r1), the order of a fractionally differenced noise with that r1. */
  delta: number;
  differences: number;
};

/**
 * Power-law noise type at averaging factor m from the lag-1 autocorrelation r1 of the averages, differenced until
 * δ = r1/(1 + r1) < 1/4: α = −round(2δ) − 2 · differences.
 *
 * Averages of m values are formed in each stretch, a straight line is taken off, and the sums of r1 about each
 * stretch's mean are pooled, over stretches with at least 30 averages.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1.
 * @param lowest Lowest exponent the statistic converges for: −2 for Allan, −4 for Hadamard.
 * @returns Undefined when no stretch has 30 averages, or the averages do not vary.
 *
 * Linear in the number of values.
 * Source: W. J. Riley and C. A. Greenhall, Power law noise identification using the lag 1 autocorrelation, 18th
 * European Frequency and Time Forum (2004), for frequency data. The pooling is ours.
 */
export function identifyNoise(
  stretches: readonly Float64Array[],
  m: number,
  lowest: -2 | -4 = -2,
): IdentifiedNoise | undefined {
  let series = stretches.filter((y) => y.length >= fewestAverages * m).map((y) => takeLineOff(averages(y, m)));

  for (let differences = 0; ; differences++) {
    const r1 = pooledLagOne(series);
    if (!Number.isFinite(r1)) return undefined;
    const delta = r1 / (1 + r1);
    if (delta < 0.25 || differences === -lowest / 2) {
      const alpha = Math.max(lowest, Math.min(2, 0 - Math.round(2 * delta) - 2 * differences));
      return { alpha: alpha as Alpha, r1, delta, differences };
    }
    series = series.map(differenceInPlace);
  }
}

function averages(y: Float64Array, m: number): Float64Array {
  const means = new Float64Array(Math.floor(y.length / m));
  for (let k = 0; k < means.length; k++) {
    let sum = 0;
    for (let i = k * m; i < (k + 1) * m; i++) sum += y[i] - y[0];
    means[k] = sum / m;
  }
  return means;
}

/** Over z itself, which is returned. */
function takeLineOff(z: Float64Array): Float64Array {
  const middle = (z.length - 1) / 2;
  let sum = 0;
  let products = 0;
  for (let i = 0; i < z.length; i++) {
    sum += z[i];
    products += (i - middle) * z[i];
  }
  const mean = sum / z.length;
  const slope = products / ((z.length * (z.length ** 2 - 1)) / 12);
  for (let i = 0; i < z.length; i++) z[i] -= mean + slope * (i - middle);
  return z;
}

/** Over z itself, of which all but the last place is returned. */
function differenceInPlace(z: Float64Array): Float64Array {
  for (let i = 1; i < z.length; i++) z[i - 1] = z[i] - z[i - 1];
  return z.subarray(0, z.length - 1);
}

function pooledLagOne(series: readonly Float64Array[]): number {
  let products = 0;
  let squares = 0;
  for (const z of series) {
    let sum = 0;
    for (let i = 0; i < z.length; i++) sum += z[i];
    const mean = sum / z.length;
    let before = 0;
    for (let i = 0; i < z.length; i++) {
      const residual = z[i] - mean;
      squares += residual * residual;
      products += residual * before;
      before = residual;
    }
  }
  return products / squares;
}
