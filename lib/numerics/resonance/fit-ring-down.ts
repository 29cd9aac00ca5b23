import { failedFit } from "@/lib/numerics/resonance/failed-fit";
import { fft } from "@/lib/numerics/resonance/fft";
import type { FitFlag } from "@/lib/numerics/resonance/flags";
import { DISTORTED_SIGMAS, NOISY_SNR } from "@/lib/numerics/resonance/judge";
import { FEWEST_POINTS } from "@/lib/numerics/resonance/prepare";
import { decayModel, emptyDecayModel, type DecayModel } from "@/lib/numerics/resonance/ring-down-model";
import type { ResonanceFit } from "@/lib/numerics/resonance/types";

export type RingDown = {
  /** Samples per second. */
  sampleHz: number;
  /** Time of the first sample after the drive was switched off, s; samples before (negative times) are left out. */
  startS: number;
  /** Voltage, real, any unit. */
  volts: Float64Array;
};

const MOST_STEPS = 60;
/** Done after a step that promises less than this share of a variance. */
const SMALL_GAIN = 1e-6;
const LEAST_GAIN = 20;

/**
 * f0 and Q from the free decay after the drive is switched off.
 *
 *   v(t) = e^(−γt)·Re(ā·e^(iωt)) + b,   f0 = fd/√(1 − 1/4Q²),   Q = √(ω² + γ²)/2γ,   fd = ω/2π
 *
 * Separable least squares over (ω, γ); first guess from two neighbouring lines of the spectrum, whose ratio for a decaying
 * tone is exact.
 *
 * @returns As fitResonance, with a the phasor at the first sample used (v = a.re·cos + a.im·sin there), amplitude |a|, b the
 *   constant offset (real) and c zero. Flags among failed, noisy (amplitude/noise < 5) and distorted (lag-1 autocorrelation
 *   of the residuals > 4/√n).
 * @throws RangeError if fewer than 11 samples follow the switch-off, one is not finite, or sampleHz is not positive.
 *
 * Source: free damped oscillation, e.g. Landau & Lifshitz, Mechanics, §25; first guess after Bertocco et al., IEEE Trans.
 * Instrum. Meas. 43 (1994) 245; projection after Golub & Pereyra, SIAM J. Numer. Anal. 10 (1973) 413.
 */
export function fitRingDown({ sampleHz, startS, volts }: RingDown): ResonanceFit {
  if (!(sampleHz > 0) || !Number.isFinite(sampleHz)) throw new RangeError(`sampleHz must be positive, got ${sampleHz}`);
  if (!Number.isFinite(startS)) throw new RangeError(`startS must be finite, got ${startS}`);
  const y = volts.subarray(startS < 0 ? Math.min(volts.length, Math.ceil(-startS * sampleHz - 1e-9)) : 0);
  const n = y.length;
  if (n < FEWEST_POINTS) throw new RangeError(`a ring-down needs at least ${FEWEST_POINTS} samples after switch-off, got ${n}`);
  if (!y.every(Number.isFinite)) throw new RangeError("a sample is not finite");

  const end = descendDecay(y, decayGuess(y));
  return end.settled ? describeDecay(end, n, sampleHz) : failedFit(end.evaluations);
}

/** Angle ω and decay γ, both per sample. */
type Decay = { omega: number; gamma: number };
type DecaySolution = Decay & { model: DecayModel; settled: boolean; evaluations: number };

/** Damped Gauss–Newton over (ω, γ). */
function descendDecay(y: Float64Array, start: Decay): DecaySolution {
  const n = y.length;
  let here = emptyDecayModel();
  let there = emptyDecayModel();
  let { omega, gamma } = start;
  let damping = 0;
  let settled = false;
  let evaluations = 1;
  if (!decayModel(y, omega, gamma, here)) return { omega, gamma, model: here, settled, evaluations };
  while (!settled && evaluations < MOST_STEPS && damping < 1e8) {
    const ww = here.ww * (1 + damping);
    const gg = here.gg * (1 + damping);
    const determinant = ww * gg - here.wg ** 2;
    let dOmega = (gg * here.gradientW - here.wg * here.gradientG) / determinant;
    let dGamma = (ww * here.gradientG - here.wg * here.gradientW) / determinant;
    const gain = dOmega * here.gradientW + dGamma * here.gradientG;
    if (!Number.isFinite(gain)) break;
    settled = damping <= 1 && (gain <= (SMALL_GAIN * here.squares) / n || Math.abs(dOmega) + Math.abs(dGamma) < 1e-14);
    const longest = gamma + 2 / n;
    const cut = Math.max(1, Math.abs(dOmega) / longest, Math.abs(dGamma) / (0.7 * longest));
    dOmega /= cut;
    dGamma /= cut;
    const nextOmega = omega + dOmega;
    const nextGamma = Math.max(gamma + dGamma, gamma / 5);
    const solved = decayModel(y, nextOmega, nextGamma, there);
    evaluations++;
    if (solved && (there.squares <= here.squares || settled)) {
      [omega, gamma] = [nextOmega, nextGamma];
      [here, there] = [there, here];
      damping = damping < 1e-3 ? 0 : damping / 10;
    } else {
      damping = Math.max(1e-2, damping * 10);
    }
  }
  return { omega, gamma, model: here, settled: settled && omega > 0 && omega < Math.PI && gamma > 0, evaluations };
}

/** From angle and decay to f0 and Q, variances carried along to first order. */
function describeDecay({ omega, gamma, model, evaluations }: DecaySolution, n: number, sampleHz: number): ResonanceFit {
  const variance = model.squares / (n - 5);
  const determinant = model.ww * model.gg - model.wg ** 2;
  if (!(determinant > 0) || model.energy - model.squares < (LEAST_GAIN + 2 * Math.log(n)) * variance) return failedFit(evaluations);
  const natural = Math.hypot(omega, gamma);
  const perRadian = sampleHz / (2 * Math.PI);
  const varW = (variance * model.gg) / determinant;
  const varG = (variance * model.ww) / determinant;
  const covWG = (-variance * model.wg) / determinant;
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
  if (snr < NOISY_SNR) flags.push("noisy");
  if (model.lag1 > DISTORTED_SIGMAS / Math.sqrt(n)) flags.push("distorted");
  return {
    f0Hz: natural * perRadian, q: natural / (2 * gamma), f0StdHz: Math.sqrt(f0f0), qStd: Math.sqrt(qq), covariance: { f0f0, f0q, qq },
    amplitude, noise, snr, flags,
    a: { re: model.cosine, im: model.sine }, b: { re: model.constant, im: 0 }, c: { re: 0, im: 0 }, evaluations,
  };
}

/**
 * Angle and decay per sample from the strongest line of the spectrum and its stronger neighbour: for a decaying tone
 * X[k] ∝ 1/(1 − ζ·e^(−2πik/n)) with ζ = e^(iω − γ), so two lines give ζ.
 */
function decayGuess(y: Float64Array): Decay {
  const n = 2 ** Math.floor(Math.log2(y.length));
  const re = y.slice(0, n);
  const im = new Float64Array(n);
  const mean = re.reduce((sum, v) => sum + v, 0) / n;
  for (let i = 0; i < n; i++) re[i] -= mean;
  fft(re, im);
  const power = (k: number): number => re[k] * re[k] + im[k] * im[k];
  let peak = 1;
  for (let k = 2; k < n / 2; k++) if (power(k) > power(peak)) peak = k;
  const other = peak + 1 < n / 2 && (peak < 2 || power(peak + 1) > power(peak - 1)) ? peak + 1 : Math.max(peak - 1, 0);
  const unit = (k: number): [number, number] => [Math.cos((2 * Math.PI * k) / n), -Math.sin((2 * Math.PI * k) / n)];
  const [aR, aI] = unit(peak);
  const [bR, bI] = unit(other);
  const upR = re[peak] - re[other];
  const upI = im[peak] - im[other];
  const downR = re[peak] * aR - im[peak] * aI - (re[other] * bR - im[other] * bI);
  const downI = re[peak] * aI + im[peak] * aR - (re[other] * bI + im[other] * bR);
  const omega = Math.atan2(upI * downR - upR * downI, upR * downR + upI * downI);
  const gamma = -Math.log(Math.hypot(upR, upI) / Math.hypot(downR, downI));
  const line = (2 * Math.PI * peak) / n;
  const near = Math.abs(omega - line) < (4 * Math.PI) / n;
  return { omega: near ? omega : line, gamma: gamma > 0 && gamma < 1 ? gamma : 1 / n };
}
