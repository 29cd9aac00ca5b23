import { inverse, Matrix } from "ml-matrix";
import type { Complex, Readout } from "@/lib/numerics/resonance/types";

export type CramerRaoInput = {
  frequencyHz: Float64Array;
  readout: Readout;
  f0Hz: number;
  q: number;
  a: Complex;
  /** Standard deviation of the noise in each quadrature, in the unit of a. */
  noise: number;
  /** What is fitted beside a: nothing, a constant offset, or an offset with slope. Default `slope`, as in fitResonance. */
  offset?: "none" | "constant" | "slope";
};

/**
 * Smallest standard errors of f0 and Q any unbiased fit of a complex sweep can reach.
 *
 * Inverse of the Fisher matrix Re(JᴴJ)/σ² of all real parameters (f0, Q, and real and imaginary parts of a, b, c: 8
 * with an offset that has a slope), without any projection.
 *
 * @returns f0StdHz in Hz, qStd, and their correlation.
 * @throws RangeError if the frequencies cannot determine the parameters (fewer than 11, or no span), or f0, Q or noise
 *   is not positive.
 *
 * Source: Kay, Fundamentals of Statistical Signal Processing: Estimation Theory (1993), §3.9 and §15.7, white Gaussian noise.
 */
export function cramerRaoBound({ frequencyHz, readout, f0Hz, q, a, noise, offset = "slope" }: CramerRaoInput): {
  f0StdHz: number;
  qStd: number;
  correlation: number;
} {
  const n = frequencyHz.length;
  const low = Math.min(...frequencyHz);
  const high = Math.max(...frequencyHz);
  if (n < 11 || !(high > low)) throw new RangeError("a bound needs at least 11 frequencies and a span");
  if (!(f0Hz > 0) || !(q > 0) || !(noise > 0)) throw new RangeError("f0, Q and noise must be positive");
  const columns = { none: 4, constant: 6, slope: 8 }[offset];
  const jacobian = new Matrix(2 * n, columns);
  frequencyHz.forEach((f, i) => {
    const [e, shift, stretch] = derivatives(f, readout, f0Hz, q);
    const complex = [multiply(a, shift), multiply(a, stretch), e, multiply({ re: 0, im: 1 }, e)];
    const s = (f - (low + high) / 2) / (high - low);
    complex.push({ re: 1, im: 0 }, { re: 0, im: 1 }, { re: s, im: 0 }, { re: 0, im: s });
    for (let k = 0; k < columns; k++) {
      jacobian.set(2 * i, k, complex[k].re);
      jacobian.set(2 * i + 1, k, complex[k].im);
    }
  });
  const covariance = inverse(jacobian.transpose().mmul(jacobian));
  const shiftStd = noise * Math.sqrt(covariance.get(0, 0));
  const stretchStd = noise * Math.sqrt(covariance.get(1, 1));
  return {
    f0StdHz: (shiftStd * f0Hz) / (2 * q),
    qStd: stretchStd * q,
    correlation: (noise * noise * covariance.get(0, 1)) / (shiftStd * stretchStd),
  };
}

/** Resonance of unit height and its derivatives with respect to 2Q·ln f0 and ln Q. */
export function derivatives(f: number, readout: Readout, f0: number, q: number): [Complex, Complex, Complex] {
  const x = (q * (f - f0) * (f + f0)) / (f * f0);
  const l = { re: 1 / (1 + x * x), im: -x / (1 + x * x) };
  const squared = multiply(l, l);
  const shift = multiply({ re: 0, im: (f / f0 + f0 / f) / 2 }, squared);
  const stretch = multiply({ re: 0, im: -x }, squared);
  if (readout === "velocity") return [l, shift, stretch];
  const m = { re: 0, im: -f0 / f };
  const e = multiply(m, l);
  const own = multiply(m, shift);
  return [e, { re: own.re + e.re / (2 * q), im: own.im + e.im / (2 * q) }, multiply(m, stretch)];
}

export function multiply(u: Complex, v: Complex): Complex {
  return { re: u.re * v.re - u.im * v.im, im: u.re * v.im + u.im * v.re };
}
