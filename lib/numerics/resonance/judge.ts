import type { FitFlag } from "@/lib/numerics/resonance/flags";

const EDGE_SHARE = 0.1;
const NARROW_HALF_WIDTHS = 2.5;
const SPARSE_POINTS = 3;
export const NOISY_SNR = 5;
export const DISTORTED_SIGMAS = 4;
const RUSHED_RING_DOWNS = 5;

export type Judged = {
  f0Hz: number;
  q: number;
  snr: number;
  /** Lowest and highest frequency of the sweep, Hz. */
  low: number;
  high: number;
  points: number;
  /** Points with |Q(f/f0 − f0/f)| ≤ 1. */
  pointsInBand: number;
  /** Lag-1 autocorrelation of the residuals in order of frequency. */
  lag1: number;
  bent: boolean;
  dwellS?: number;
};

/** Points of the first n frequencies inside the half-power band |Q(f/f0 − f0/f)| ≤ 1. */
export function countInBand(f: Float64Array, n: number, f0Hz: number, q: number): number {
  let count = 0;
  for (let i = 0; i < n; i++) if (Math.abs((q * (f[i] - f0Hz) * (f[i] + f0Hz)) / (f[i] * f0Hz)) <= 1) count++;
  return count;
}

/** What is to be remarked about a sweep whose fit settled; thresholds as in the analysis manual, in the order of FLAGS. */
export function judge({ f0Hz, q, snr, low, high, points, pointsInBand, lag1, bent, dwellS }: Judged): FitFlag[] {
  const flags: FitFlag[] = [];
  const span = high - low;
  if (f0Hz < low + EDGE_SHARE * span || f0Hz > high - EDGE_SHARE * span) flags.push("edge");
  if (bent) flags.push("bent");
  if (span < (NARROW_HALF_WIDTHS * f0Hz) / (2 * q)) flags.push("narrow");
  if (pointsInBand < SPARSE_POINTS) flags.push("sparse");
  if (snr < NOISY_SNR) flags.push("noisy");
  if (lag1 > DISTORTED_SIGMAS / Math.sqrt(points)) flags.push("distorted");
  if (dwellS !== undefined && dwellS < (RUSHED_RING_DOWNS * q) / (Math.PI * f0Hz)) flags.push("rushed");
  return flags;
}
