import { riceMean, riceSlope } from "@/lib/numerics/resonance/rice";
import type { Readout } from "@/lib/numerics/resonance/types";

/** f0, Q (as shift and stretch), |a|, and real and imaginary part of b and c relative to a. */
export const MAGNITUDE_PARAMETERS = 7;

export type MagnitudeParameters = { f0: number; q: number; a: number; bRe: number; bIm: number; cRe: number; cIm: number };

/** A magnitude sweep in ascending order; s runs from −½ to ½. */
export type MagnitudeSweep = { n: number; f: Float64Array; s: Float64Array; y: Float64Array };

export type MagnitudeModel = {
  /** Σ w·(y − E|z|)². */
  cost: number;
  /** Normal equations, row by row. */
  gram: Float64Array;
  gradient: Float64Array;
  residual: Float64Array;
  /** E|z| of each point. */
  mean: Float64Array;
  /** |z| without noise. */
  modulus: Float64Array;
};

export function emptyMagnitudeModel(n: number): MagnitudeModel {
  return {
    cost: 0,
    gram: new Float64Array(MAGNITUDE_PARAMETERS ** 2),
    gradient: new Float64Array(MAGNITUDE_PARAMETERS),
    residual: new Float64Array(n),
    mean: new Float64Array(n),
    modulus: new Float64Array(n),
  };
}

const row = new Float64Array(MAGNITUDE_PARAMETERS);

/**
 * The magnitude model, its residuals and normal equations at one set of parameters.
 *
 * z = aE + b + cs with a real and positive; what is compared with the data is the mean of |z + noise| (riceMean).
 * Derivatives of |z|: Re(z̄·∂z)/|z|. The first two parameters are 2Q·ln f0 and ln Q.
 *
 * @param sigma Noise of each quadrature, 0 to leave its bias out.
 * @param weight Weight of each point.
 */
export function magnitudeModel(
  { n, f, s, y }: MagnitudeSweep,
  readout: Readout,
  { f0, q, a, bRe, bIm, cRe, cIm }: MagnitudeParameters,
  { sigma, weight }: { sigma: number; weight: Float64Array },
  out: MagnitudeModel,
): void {
  const displacement = readout === "displacement";
  const { gram, gradient, residual, mean, modulus } = out;
  gram.fill(0);
  gradient.fill(0);
  let cost = 0;
  for (let i = 0; i < n; i++) {
    const x = (q * (f[i] - f0) * (f[i] + f0)) / (f[i] * f0);
    const w = f0 / f[i];
    const power = 1 / (1 + x * x);
    const lIm = -x * power;
    const eR = displacement ? w * lIm : power;
    const eI = displacement ? -w * power : lIm;
    const zR = a * eR + bRe + cRe * s[i];
    const zI = a * eI + bIm + cIm * s[i];
    const nu = Math.sqrt(zR * zR + zI * zI);
    const uR = nu > 0 ? zR / nu : 0;
    const uI = nu > 0 ? zI / nu : 0;
    const slope = riceSlope(nu, sigma);
    // W = i·E·L: the common factor of both derivatives of E.
    const wR = -(eR * lIm + eI * power);
    const wI = eR * power - eI * lIm;
    const along = a * (uR * wR + uI * wI);
    const height = uR * eR + uI * eI;
    row[0] = 0.5 * (f[i] / f0 + w) * along + (displacement ? (a * height) / (2 * q) : 0);
    row[1] = -x * along;
    row[2] = height;
    row[3] = uR;
    row[4] = uI;
    row[5] = uR * s[i];
    row[6] = uI * s[i];
    modulus[i] = nu;
    mean[i] = riceMean(nu, sigma);
    const r = y[i] - mean[i];
    residual[i] = r;
    cost += weight[i] * r * r;
    for (let j = 0; j < MAGNITUDE_PARAMETERS; j++) {
      const wj = weight[i] * slope * row[j];
      gradient[j] += wj * r;
      for (let k = 0; k <= j; k++) gram[MAGNITUDE_PARAMETERS * j + k] += wj * slope * row[k];
    }
  }
  for (let j = 0; j < MAGNITUDE_PARAMETERS; j++) {
    for (let k = 0; k < j; k++) gram[MAGNITUDE_PARAMETERS * k + j] = gram[MAGNITUDE_PARAMETERS * j + k];
  }
  out.cost = cost;
}
