import { inverse, Matrix } from "ml-matrix";
import { derivatives, multiply } from "@/lib/numerics/resonance/cramer-rao";
import { riceInformation } from "@/lib/numerics/resonance/rice";
import type { Complex, Readout } from "@/lib/numerics/resonance/types";

/** A direction that the modulus does not determine is held by this share of a column's weight. */
const HELD = 1e-11;

export type MagnitudeBoundInput = {
  frequencyHz: Float64Array;
  readout: Readout;
  f0Hz: number;
  q: number;
  a: Complex;
  /** Offset at the middle of the sweep and its change over the sweep. */
  b: Complex;
  c: Complex;
  /** Standard deviation of the noise in each quadrature, in the unit of a. */
  noise: number;
};

/**
 * Smallest standard errors of f0 and Q any unbiased fit of a magnitude sweep can reach.
 *
 * Inverse of the Fisher matrix of the seven parameters that a modulus knows (f0, Q, |a|, b and c relative to a), each point
 * weighted by the information of Rice's distribution: Σ h(ν/σ)/4σ⁴ · ∂ν²/∂θ · ∂ν²/∂θ, with ν = |aE + b + cs|.
 *
 * Where b or c vanish their phase is no parameter, and the bound is that of a fit which knows that they do.
 *
 * @throws RangeError if there are fewer than 11 frequencies or no span, or if f0, Q or noise is not positive.
 *
 * Source: Kay, Fundamentals of Statistical Signal Processing: Estimation Theory (1993), §3.8; riceInformation.
 */
export function magnitudeBound({ frequencyHz, readout, f0Hz, q, a, b, c, noise }: MagnitudeBoundInput): { f0StdHz: number; qStd: number } {
  const low = Math.min(...frequencyHz);
  const high = Math.max(...frequencyHz);
  if (frequencyHz.length < 11 || !(high > low)) throw new RangeError("a bound needs at least 11 frequencies and a span");
  if (!(f0Hz > 0) || !(q > 0) || !(noise > 0)) throw new RangeError("f0, Q and noise must be positive");

  const size = Math.hypot(a.re, a.im);
  const unit = { re: a.re / size, im: a.im / size };
  const jacobian = new Matrix(frequencyHz.length, 7);
  frequencyHz.forEach((f, i) => {
    const [e, shift, stretch] = derivatives(f, readout, f0Hz, q);
    const s = (f - (low + high) / 2) / (high - low);
    const resonance = multiply(a, e);
    const z = { re: resonance.re + b.re + c.re * s, im: resonance.im + b.im + c.im * s };
    const columns = [multiply(a, shift), multiply(a, stretch), multiply(unit, e), { re: 1, im: 0 }, { re: 0, im: 1 }, { re: s, im: 0 }, { re: 0, im: s }];
    const root = Math.sqrt(riceInformation(Math.hypot(z.re, z.im) / noise));
    columns.forEach((column, k) => jacobian.set(i, k, root * (z.re * column.re + z.im * column.im)));
  });
  // ∂ν² is twice that, and the information a quarter of 1/σ⁴: the two fours cancel. Columns are brought to one size first.
  const sizes = Array.from({ length: 7 }, (_, k) => Math.hypot(...jacobian.getColumn(k)));
  sizes.forEach((length, k) => jacobian.mulColumn(k, 1 / Math.max(length, Number.MIN_VALUE)));
  const covariance = inverse(Matrix.add(jacobian.transpose().mmul(jacobian), Matrix.eye(7, 7, HELD)));
  const std = (k: number): number => (noise * noise * Math.sqrt(covariance.get(k, k))) / sizes[k];
  return { f0StdHz: (std(0) * f0Hz) / (2 * q), qStd: std(1) * q };
}
