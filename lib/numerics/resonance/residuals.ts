import type { PreparedSweep } from "@/lib/numerics/resonance/prepare";
import { COLUMN, type ProjectedModel } from "@/lib/numerics/resonance/projected-model";
import type { Readout } from "@/lib/numerics/resonance/types";

export type Residuals = {
  /** Σ|r|². */
  squares: number;
  /** Σ Re(r̄ᵢ rᵢ₊₁) / Σ|r|², in order of frequency. */
  lag1: number;
  /** First estimate of the bend, half-widths: one Gauss–Newton step from none; see bentModel. */
  bend: number;
  /** Its variance over σ². */
  bendVariance: number;
};

/** Residuals this small against the data, or against the steepness Q of the model, are rounding and say nothing. */
const ROUNDING = 2 ** -50;

/**
 * Residuals of the projected fit, formed point by point: the cost by difference has no digits left for clean data.
 *
 * In the same pass the derivative with respect to the bend, column K = i·w³/(1 + x²)·V, is set against them.
 *
 * @param model Model at (f0, q), its derivative fields no further than one last small step away.
 */
export function residualsOf(p: PreparedSweep, readout: Readout, f0: number, q: number, model: ProjectedModel): Residuals {
  const { n, f, inverseF, slope, re, im } = p;
  const displacement = readout === "displacement";
  const { aRe, aIm, slopeRe, slopeIm } = model;
  const meanRe = model.meanRe / n;
  const meanIm = model.meanIm / n;
  const scale = q / f0;
  const inverseF0 = 1 / f0;
  let squares = 0, products = 0, lastRe = 0, lastIm = 0;
  let k1R = 0, k1I = 0, ksR = 0, ksI = 0, ekR = 0, ekI = 0, kk = 0, uk = 0, krR = 0, krI = 0;
  for (let i = 0; i < n; i++) {
    const x = scale * (f[i] - f0) * (f[i] + f0) * inverseF[i];
    const power = 1 / (1 + x * x);
    const w = f0 * inverseF[i];
    const lIm = -x * power;
    const eR = displacement ? w * lIm : power;
    const eI = displacement ? -w * power : lIm;
    const s = slope[i];
    const dR = eR - meanRe - s * slopeRe;
    const dI = eI - meanIm - s * slopeIm;
    const rRe = re[i] - (aRe * dR - aIm * dI);
    const rIm = im[i] - (aRe * dI + aIm * dR);
    squares += rRe * rRe + rIm * rIm;
    products += rRe * lastRe + rIm * lastIm;
    lastRe = rRe;
    lastIm = rIm;

    const vR = eR * power - eI * lIm;
    const vI = eR * lIm + eI * power;
    const lift = w * w * w * power;
    const kR = -lift * vI;
    const kI = lift * vR;
    const k2 = lift * (vR * vR + vI * vI);
    k1R += kR;
    k1I += kI;
    ksR += s * kR;
    ksI += s * kI;
    ekR += eR * kR + eI * kI;
    ekI += eR * kI - eI * kR;
    kk += lift * k2;
    uk += 0.5 * (f[i] * inverseF0 + w) * k2;
    krR += kR * rRe + kI * rIm;
    krI += kR * rIm - kI * rRe;
  }

  const { columns, norm } = model;
  const a2 = aRe * aRe + aIm * aIm;
  ekR -= (model.meanRe * k1R + model.meanIm * k1I) / n + slopeRe * ksR + slopeIm * ksI;
  ekI -= (model.meanRe * k1I - model.meanIm * k1R) / n + slopeRe * ksI - slopeIm * ksR;
  kk -= (k1R * k1R + k1I * k1I) / n + ksR * ksR + ksI * ksI + (ekR * ekR + ekI * ekI) / norm;
  /** Re(columnᴴK) after projection, from its value before. */
  const projected = (raw: number, o: number): number =>
    raw -
    (columns[o + COLUMN.meanRe] * k1R + columns[o + COLUMN.meanIm] * k1I) / n -
    (columns[o + COLUMN.slopeRe] * ksR + columns[o + COLUMN.slopeIm] * ksI) -
    (columns[o + COLUMN.eRe] * ekR + columns[o + COLUMN.eIm] * ekI) / norm;
  const kq = a2 * projected(0, 0);
  const kh = a2 * projected(uk, COLUMN.perColumn);
  const { hh, hq, qq } = model;
  const schur = a2 * kk - (qq * kh * kh - 2 * hq * kh * kq + hh * kq * kq) / (hh * qq - hq * hq);
  const exact = squares <= ROUNDING ** 2 * (p.rawEnergy + q * q * a2 * norm);
  return {
    squares,
    lag1: exact ? 0 : products / squares,
    bend: exact ? 0 : (aRe * krR + aIm * krI) / schur,
    bendVariance: 1 / schur,
  };
}
