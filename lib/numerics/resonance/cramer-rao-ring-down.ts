import { inverse, Matrix } from "ml-matrix";

export type RingDownBoundInput = {
  /** Samples per second, and how many from the switch-off on. */
  sampleHz: number;
  n: number;
  f0Hz: number;
  q: number;
  /** Amplitude at the first sample, and phase there (v = amplitude·cos φ), rad. */
  amplitude: number;
  phase: number;
  /** Standard deviation of the noise of a sample, in the unit of the amplitude. */
  noise: number;
};

/**
 * Smallest standard errors of f0 and Q any unbiased fit of a free decay with a constant offset can reach.
 *
 * Inverse of the Fisher matrix JᵀJ/σ² of (ω, γ, both parts of the phasor, offset), carried over to f0 = √(ω² + γ²)/2π and
 * Q = √(ω² + γ²)/2γ.
 *
 * @returns f0StdHz in Hz and qStd.
 * @throws RangeError if there are fewer than 11 samples, Q is not above ½, or another of the numbers but the phase is not positive.
 *
 * Source: Yao & Pandit, IEEE Trans. Signal Process. 43 (1995) 878; with γ → 0 that of a steady tone, Rife & Boorstyn, IEEE Trans. Inf. Theory 20
 * (1974) 591.
 */
export function ringDownBound({ sampleHz, n, f0Hz, q, amplitude, phase, noise }: RingDownBoundInput): { f0StdHz: number; qStd: number } {
  if (!(n >= 11)) throw new RangeError("a bound needs at least 11 samples");
  if (!(sampleHz > 0) || !(f0Hz > 0) || !(q > 0.5) || !(amplitude > 0) || !(noise > 0)) {
    throw new RangeError("sampleHz, f0, amplitude and noise must be positive, and Q above a half");
  }
  const natural = 2 * Math.PI * f0Hz;
  const gamma = natural / (2 * q);
  const omega = Math.sqrt(natural * natural - gamma * gamma);
  const length = n / sampleHz;
  const jacobian = new Matrix(n, 5);
  for (let i = 0; i < n; i++) {
    const t = i / sampleHz;
    const height = Math.exp(-gamma * t);
    const c = height * Math.cos(omega * t + phase);
    const s = height * Math.sin(omega * t + phase);
    jacobian.setRow(i, [(-amplitude * t * s) / length, (-amplitude * t * c) / length, c, -s, 1]);
  }
  const covariance = inverse(jacobian.transpose().mmul(jacobian)).mul(noise * noise);
  const [ww, wg, gg] = [covariance.get(0, 0), covariance.get(0, 1), covariance.get(1, 1)].map((v) => v / (length * length));
  const along = (w: number, g: number): number => Math.sqrt(w * w * ww + 2 * w * g * wg + g * g * gg);
  return {
    f0StdHz: along(omega / natural, gamma / natural) / (2 * Math.PI),
    qStd: along(omega / (2 * gamma * natural), 1 / (2 * natural) - natural / (2 * gamma * gamma)),
  };
}
