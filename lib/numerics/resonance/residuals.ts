import type { PreparedSweep } from "@/lib/numerics/resonance/prepare";
import type { ProjectedModel } from "@/lib/numerics/resonance/projected-model";
import type { Readout } from "@/lib/numerics/resonance/types";

export type Residuals = {
  /** Σ|r|². */
  squares: number;
  /** Σ Re(r̄ᵢ rᵢ₊₁) / Σ|r|², in order of frequency. */
  lag1: number;
};

/** Residuals of the projected fit, formed point by point: the cost by difference has no digits left for clean data. */
export function residualsOf(p: PreparedSweep, readout: Readout, f0: number, q: number, model: ProjectedModel): Residuals {
  const { n, f, inverseF, slope, re, im } = p;
  const displacement = readout === "displacement";
  const { aRe, aIm, slopeRe, slopeIm } = model;
  const meanRe = model.meanRe / n;
  const meanIm = model.meanIm / n;
  const scale = q / f0;
  let squares = 0, products = 0, lastRe = 0, lastIm = 0;
  for (let i = 0; i < n; i++) {
    const x = scale * (f[i] - f0) * (f[i] + f0) * inverseF[i];
    const power = 1 / (1 + x * x);
    const w = f0 * inverseF[i];
    const eRe = (displacement ? -w * x * power : power) - meanRe - slope[i] * slopeRe;
    const eIm = (displacement ? -w * power : -x * power) - meanIm - slope[i] * slopeIm;
    const rRe = re[i] - (aRe * eRe - aIm * eIm);
    const rIm = im[i] - (aRe * eIm + aIm * eRe);
    squares += rRe * rRe + rIm * rIm;
    products += rRe * lastRe + rIm * lastIm;
    lastRe = rRe;
    lastIm = rIm;
  }
  return { squares, lag1: squares > 0 ? products / squares : 0 };
}
