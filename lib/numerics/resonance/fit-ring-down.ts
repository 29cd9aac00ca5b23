import { failedFit } from "@/lib/numerics/resonance/failed-fit";
import type { FitFlag } from "@/lib/numerics/resonance/flags";
import { DISTORTED_SIGMAS, NOISY_SNR } from "@/lib/numerics/resonance/judge";
import { FEWEST_POINTS } from "@/lib/numerics/resonance/prepare";
import { isDecayBent } from "@/lib/numerics/resonance/ring-down-bend";
import { descendDecay, type DecaySolution } from "@/lib/numerics/resonance/ring-down-descend";
import { decayGuess } from "@/lib/numerics/resonance/ring-down-guess";
import type { ResonanceFit } from "@/lib/numerics/resonance/types";

export type RingDown = {
  /** Samples per second. */
  sampleHz: number;
  /** Time of the first sample after the drive was switched off, s; samples before (negative times) are left out. */
  startS: number;
  /** Voltage, real, any unit. */
  volts: Float64Array;
};

/** A tone must explain this much of the sum of squares, in variances of a sample, beyond 2 ln n; below TRUSTED_GAIN it is doubted. */
const LEAST_GAIN = 20;
const TRUSTED_GAIN = 100;
const DOUBTFUL_SIGMAS = 3;
/** A doubted record is looked at anew by its first quarter, sixteenth and so on, where a short decay stands out better. */
const SHORTER = [4, 16, 64, 256];

/**
 * f0 and Q from the free decay after the drive is switched off.
 *
 *   v(t) = e^(−γt)·Re(ā·e^(iωt)) + b,   f0 = fd/√(1 − 1/4Q²),   Q = √(ω² + γ²)/2γ,   fd = ω/2π
 *
 * Separable least squares over (ω, γ); first guess from two neighbouring lines of the spectrum, whose ratio for a decaying
 * tone is exact. Velocity and displacement decay alike, so the readout does not matter.
 *
 * @returns As fitResonance, with a the phasor at the first sample used (v = a.re·cos + a.im·sin there), amplitude |a|, b the
 *   constant offset (real) and c zero. Flags among
 *   - `failed`: no convergence, or no decaying tone told from the noise; every number is then NaN
 *   - `bent`: a frequency that follows the square of the amplitude fits better at 4σ and is shifted at the first sample by more
 *     than 0.1 half-width f0/2Q
 *   - `noisy`: amplitude/noise below 5
 *   - `distorted`: lag-1 autocorrelation of the residuals above 4/√n
 * @throws RangeError if fewer than 11 samples follow the switch-off, one is not finite, or sampleHz is not positive.
 *
 * Source: free damped oscillation, e.g. Landau & Lifshitz, Mechanics, §25; projection after Golub & Pereyra, SIAM J. Numer.
 * Anal. 10 (1973) 413.
 */
export function fitRingDown({ sampleHz, startS, volts }: RingDown): ResonanceFit {
  if (!(sampleHz > 0) || !Number.isFinite(sampleHz)) throw new RangeError(`sampleHz must be positive, got ${sampleHz}`);
  if (!Number.isFinite(startS)) throw new RangeError(`startS must be finite, got ${startS}`);
  const y = volts.subarray(startS < 0 ? Math.min(volts.length, Math.ceil(-startS * sampleHz - 1e-9)) : 0);
  const n = y.length;
  if (n < FEWEST_POINTS) throw new RangeError(`a ring-down needs at least ${FEWEST_POINTS} samples after switch-off, got ${n}`);
  if (!y.every(Number.isFinite)) throw new RangeError("a sample is not finite");

  let best = descendDecay(y, decayGuess(y, n), 2);
  let { evaluations } = best;
  for (const shorter of SHORTER) {
    if (isTrusted(best, n) || n / shorter < 16) break;
    const other = descendDecay(y, decayGuess(y, n / shorter), 2);
    evaluations += other.evaluations;
    if (other.settled && (!best.settled || other.model.squares < best.model.squares)) best = other;
  }
  if (!best.settled || explainedOf(best, n) < LEAST_GAIN + 2 * Math.log(n)) return failedFit(evaluations);
  const bend = isDecayBent(y, best, best.model.lag1 > DOUBTFUL_SIGMAS / Math.sqrt(n));
  return describeDecay(best, { n, sampleHz, bent: bend.bent, evaluations: evaluations + bend.evaluations });
}

function isTrusted(end: DecaySolution, n: number): boolean {
  return end.settled && explainedOf(end, n) > TRUSTED_GAIN && end.model.lag1 < DOUBTFUL_SIGMAS / Math.sqrt(n);
}

/** What the tone explains, in variances of a sample. */
function explainedOf({ model: { energy, squares } }: DecaySolution, n: number): number {
  if (squares > 0) return ((energy - squares) * (n - 5)) / squares;
  return energy > 0 ? Infinity : 0;
}

/** From angle and decay to f0 and Q, variances carried along to first order. */
function describeDecay(
  { omega, gamma, model }: DecaySolution,
  { n, sampleHz, bent, evaluations }: { n: number; sampleHz: number; bent: boolean; evaluations: number },
): ResonanceFit {
  const variance = model.squares / (n - 5);
  const [ww, wg, , , gg] = model.gram;
  const determinant = (ww * gg - wg ** 2) * n * n;
  if (!(determinant > 0)) return failedFit(evaluations);
  const natural = Math.hypot(omega, gamma);
  const perRadian = sampleHz / (2 * Math.PI);
  const varW = (variance * gg) / determinant;
  const varG = (variance * ww) / determinant;
  const covWG = (-variance * wg) / determinant;
  const f0W = (perRadian * omega) / natural;
  const f0G = (perRadian * gamma) / natural;
  const qW = omega / (2 * gamma * natural);
  const qG = 1 / (2 * natural) - natural / (2 * gamma * gamma);
  const f0f0 = f0W * f0W * varW + 2 * f0W * f0G * covWG + f0G * f0G * varG;
  const qq = qW * qW * varW + 2 * qW * qG * covWG + qG * qG * varG;
  const f0q = f0W * qW * varW + (f0W * qG + f0G * qW) * covWG + f0G * qG * varG;
  const noise = Math.sqrt(variance);
  const amplitude = Math.hypot(model.cosine, model.sine);
  const snr = noise > 0 ? amplitude / noise : Infinity;
  const flags: FitFlag[] = [];
  if (bent) flags.push("bent");
  if (snr < NOISY_SNR) flags.push("noisy");
  if (model.lag1 > DISTORTED_SIGMAS / Math.sqrt(n)) flags.push("distorted");
  return {
    f0Hz: natural * perRadian, q: natural / (2 * gamma), f0StdHz: Math.sqrt(f0f0), qStd: Math.sqrt(qq), covariance: { f0f0, f0q, qq },
    amplitude, noise, snr, flags,
    a: { re: model.cosine, im: model.sine }, b: { re: model.constant, im: 0 }, c: { re: 0, im: 0 }, evaluations,
  };
}
