import type { Alpha } from "@/lib/numerics/stability/power-law";

/** Fewer averages than this in a stretch say too little about the noise. */
export const fewestAverages = 30;

export type IdentifiedNoise = {
  alpha: Alpha;
  /** Lag-1 autocorrelation of the averages after `differences` differences; −1 means their running sum, the phase. */
  r1: number;
  /** r1/(1 + r1), the order of a fractionally differenced noise with that r1. */
  delta: number;
  differences: number;
};

/**
 * Power-law noise type at averaging factor m from the lag-1 autocorrelation r1 of the averages, differenced until
 * δ = r1/(1 + r1) < 1/4: α = −round(2δ) − 2 · differences. Their running sum, the phase, is tried first (α = 2 when its
 * δ < 1/4): white phase noise is told far more surely there.
 *
 * Averages of m values are formed in each stretch, a straight line is taken off them (a parabola off the phase), and the
 * sums of r1 about each stretch's mean are pooled, over stretches with at least 30 averages.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1.
 * @param lowest Lowest exponent the statistic converges for: −2 for Allan, −4 for Hadamard.
 * @returns Undefined when no stretch has 30 averages, or the averages do not vary.
 *
 * Linear in the number of values.
 * Source: W. J. Riley and C. A. Greenhall, Power law noise identification using the lag 1 autocorrelation, 18th
 * European Frequency and Time Forum (2004): the method for phase data, which from the first difference on is that for
 * frequency data. The pooling is ours.
 */
export function identifyNoise(
  stretches: readonly Float64Array[],
  m: number,
  lowest: -2 | -4 = -2,
): IdentifiedNoise | undefined {
  let series = stretches.filter((y) => y.length >= fewestAverages * m).map((y) => averages(y, m));
  const phase = order(series.map((z) => takeParabolaOff(runningSum(z))));
  if (phase.delta < 0.25) return { alpha: 2, ...phase, differences: -1 };

  series.forEach(takeLineOff);
  for (let differences = 0; ; differences++) {
    const found = order(series);
    if (!Number.isFinite(found.r1)) return undefined;
    if (found.delta < 0.25 || differences === -lowest / 2) {
      const alpha = Math.max(lowest, Math.min(2, 0 - Math.round(2 * found.delta) - 2 * differences));
      return { alpha: alpha as Alpha, ...found, differences };
    }
    series = series.map(differenceInPlace);
  }
}

function order(series: readonly Float64Array[]): { r1: number; delta: number } {
  const r1 = pooledLagOne(series);
  return { r1, delta: r1 / (1 + r1) };
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

function runningSum(z: Float64Array): Float64Array {
  let mean = 0;
  for (let i = 0; i < z.length; i++) mean += z[i] / z.length;
  const sums = new Float64Array(z.length + 1);
  for (let i = 0; i < z.length; i++) sums[i + 1] = sums[i] + (z[i] - mean);
  return sums;
}

/** Over z itself, mean included, by least squares; z is returned. */
function takeLineOff(z: Float64Array): Float64Array {
  const n = z.length;
  const middle = (n - 1) / 2;
  let sum = 0;
  let products = 0;
  for (let i = 0; i < n; i++) {
    sum += z[i];
    products += (i - middle) * z[i];
  }
  const mean = sum / n;
  const slope = products / ((n * (n ** 2 - 1)) / 12);
  for (let i = 0; i < n; i++) z[i] -= mean + slope * (i - middle);
  return z;
}

/** Over z itself, by least squares with the second orthogonal polynomial t² − (n² − 1)/12; z is returned. */
function takeParabolaOff(z: Float64Array): Float64Array {
  const n = takeLineOff(z).length;
  const middle = (n - 1) / 2;
  const meanSquare = (n ** 2 - 1) / 12;
  let products = 0;
  for (let i = 0; i < n; i++) products += ((i - middle) ** 2 - meanSquare) * z[i];
  const curvature = products / ((n * (n ** 2 - 1) * (n ** 2 - 4)) / 180);
  for (let i = 0; i < n; i++) z[i] -= curvature * ((i - middle) ** 2 - meanSquare);
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
