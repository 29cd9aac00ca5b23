import type { PreparedSweep } from "@/lib/numerics/resonance/prepare";
import type { Readout } from "@/lib/numerics/resonance/types";

/**
 * The separable least-squares problem at one (f0, Q), offset and slope projected out.
 *
 * With E the resonance of unit height, E⊥ its part orthogonal to constant and slope, and y the projected data,
 * the best a is E⊥ᴴy/E⊥ᴴE⊥ and the cost |y|² − |E⊥ᴴy|²/E⊥ᴴE⊥. The derivatives are with respect to
 * h = 2Q·ln f0 (a shift in half-widths) and ln Q; columns a·∂E/∂h and a·∂E/∂ln Q are projected orthogonal to
 * constant, slope and E. Their Gram matrix is the Schur complement of the full Jacobian's, so its inverse times σ²
 * is the covariance of (h, ln Q), and JᵀJ⁻¹·Jᵀr is Kaufman's Gauss–Newton step.
 */
export type ProjectedModel = {
  cost: number;
  aRe: number;
  aIm: number;
  /** E⊥ᴴE⊥. */
  norm: number;
  /** ΣE and Σ slope·E. */
  meanRe: number;
  meanIm: number;
  slopeRe: number;
  slopeIm: number;
  /** Gram matrix of the projected derivative columns. */
  hh: number;
  hq: number;
  qq: number;
  /** Projected derivative columns times the residual. */
  gradientH: number;
  gradientQ: number;
  /** Unscaled columns V and U (see projectedModel): sums with the constant and the slope, and E⊥ᴴ times each. */
  columns: Float64Array;
};

/** Places in `columns`: V's six numbers, then U's. */
export const COLUMN = { meanRe: 0, meanIm: 1, slopeRe: 2, slopeIm: 3, eRe: 4, eIm: 5, perColumn: 6 } as const;

export function emptyProjectedModel(): ProjectedModel {
  return {
    cost: 0, aRe: 0, aIm: 0, norm: 0, meanRe: 0, meanIm: 0, slopeRe: 0, slopeIm: 0,
    hh: 0, hq: 0, qq: 0, gradientH: 0, gradientQ: 0, columns: new Float64Array(12),
  };
}

/** Cost and a only; the derivative fields of `out` are left as they are. One pass, no allocation. */
export function projectedCost(p: PreparedSweep, readout: Readout, f0: number, q: number, out: ProjectedModel): number {
  const { n, f, inverseF, slope, re, im } = p;
  const displacement = readout === "displacement";
  const scale = q / f0;
  let meanRe = 0, meanIm = 0, slopeRe = 0, slopeIm = 0, norm = 0, yRe = 0, yIm = 0;
  for (let i = 0; i < n; i++) {
    const x = scale * (f[i] - f0) * (f[i] + f0) * inverseF[i];
    const power = 1 / (1 + x * x);
    let eRe = power;
    let eIm = -x * power;
    if (displacement) {
      const w = f0 * inverseF[i];
      const t = eRe;
      eRe = w * eIm;
      eIm = -w * t;
    }
    meanRe += eRe;
    meanIm += eIm;
    slopeRe += slope[i] * eRe;
    slopeIm += slope[i] * eIm;
    norm += eRe * eRe + eIm * eIm;
    yRe += eRe * re[i] + eIm * im[i];
    yIm += eRe * im[i] - eIm * re[i];
  }
  norm -= (meanRe * meanRe + meanIm * meanIm) / n + slopeRe * slopeRe + slopeIm * slopeIm;
  out.meanRe = meanRe;
  out.meanIm = meanIm;
  out.slopeRe = slopeRe;
  out.slopeIm = slopeIm;
  out.norm = norm;
  out.aRe = yRe / norm;
  out.aIm = yIm / norm;
  out.cost = p.energy - (yRe * yRe + yIm * yIm) / norm;
  return out.cost;
}

/**
 * Cost, a, and the normal equations of the next step. One pass, no allocation.
 *
 * With L the velocity resonance and m = 1 or f0/(if): E = mL, and up to multiples of E, which the projection removes,
 * ∂E/∂ln Q is V = mL² and ∂E/∂h is U = i·g·V, g = (f/f0 + f0/f)/2.
 *
 * Source: Golub & Pereyra, SIAM J. Numer. Anal. 10 (1973) 413; Kaufman, BIT 15 (1975) 49.
 */
export function projectedModel(p: PreparedSweep, readout: Readout, f0: number, q: number, out: ProjectedModel): void {
  const { n, f, inverseF, slope, re, im } = p;
  const displacement = readout === "displacement";
  const scale = q / f0;
  const inverseF0 = 1 / f0;
  let eyR = 0, eyI = 0, vyR = 0, vyI = 0, uyR = 0, uyI = 0;
  let e1R = 0, e1I = 0, v1R = 0, v1I = 0, u1R = 0, u1I = 0;
  let esR = 0, esI = 0, vsR = 0, vsI = 0, usR = 0, usI = 0;
  let ee = 0, vv = 0, uu = 0, evI = 0, euR = 0, euI = 0;
  for (let i = 0; i < n; i++) {
    const x = scale * (f[i] - f0) * (f[i] + f0) * inverseF[i];
    const w = f0 * inverseF[i];
    const power = 1 / (1 + x * x);
    const lIm = -x * power;
    let eR = power;
    let eI = lIm;
    if (displacement) {
      eR = w * lIm;
      eI = -w * power;
    }
    const vR = eR * power - eI * lIm;
    const vI = eR * lIm + eI * power;
    const g = 0.5 * (f[i] * inverseF0 + w);
    const uR = -g * vI;
    const uI = g * vR;
    const s = slope[i];
    const yR = re[i];
    const yI = im[i];
    // |E|², EᴴV = |m|²|L|²L and |V|² all follow from the power.
    const e2 = displacement ? w * w * power : power;
    const v2 = e2 * power;
    const gv = g * v2;
    const ev = e2 * lIm;
    ee += e2;
    vv += v2;
    uu += g * gv;
    evI += ev;
    euR -= g * ev;
    euI += gv;
    eyR += eR * yR + eI * yI;
    eyI += eR * yI - eI * yR;
    const dR = vR * yR + vI * yI;
    const dI = vR * yI - vI * yR;
    vyR += dR;
    vyI += dI;
    uyR += g * dI;
    uyI -= g * dR;
    e1R += eR;
    e1I += eI;
    v1R += vR;
    v1I += vI;
    u1R += uR;
    u1I += uI;
    esR += s * eR;
    esI += s * eI;
    vsR += s * vR;
    vsI += s * vI;
    usR += s * uR;
    usI += s * uI;
  }

  // Orthogonal to constant and slope.
  let evR = vv;
  const perN = 1 / n;
  const norm = ee - (e1R * e1R + e1I * e1I) * perN - esR * esR - esI * esI;
  vv -= (v1R * v1R + v1I * v1I) * perN + vsR * vsR + vsI * vsI;
  uu -= (u1R * u1R + u1I * u1I) * perN + usR * usR + usI * usI;
  evR -= (e1R * v1R + e1I * v1I) * perN + esR * vsR + esI * vsI;
  evI -= (e1R * v1I - e1I * v1R) * perN + esR * vsI - esI * vsR;
  euR -= (e1R * u1R + e1I * u1I) * perN + esR * usR + esI * usI;
  euI -= (e1R * u1I - e1I * u1R) * perN + esR * usI - esI * usR;
  // U = igV, so conj(U)·V is −ig|V|² before projection: purely imaginary.
  const uvR = -((u1R * v1R + u1I * v1I) * perN + usR * vsR + usI * vsI);

  // Orthogonal to E; real parts only are wanted, and |a|² is common to both columns.
  const aR = eyR / norm;
  const aI = eyI / norm;
  const a2 = aR * aR + aI * aI;
  out.cost = p.energy - a2 * norm;
  out.aRe = aR;
  out.aIm = aI;
  out.norm = norm;
  out.meanRe = e1R;
  out.meanIm = e1I;
  out.slopeRe = esR;
  out.slopeIm = esI;
  const { columns } = out;
  columns[0] = v1R;
  columns[1] = v1I;
  columns[2] = vsR;
  columns[3] = vsI;
  columns[4] = evR;
  columns[5] = evI;
  columns[6] = u1R;
  columns[7] = u1I;
  columns[8] = usR;
  columns[9] = usI;
  columns[10] = euR;
  columns[11] = euI;
  out.hh = a2 * (uu - (euR * euR + euI * euI) / norm);
  out.qq = a2 * (vv - (evR * evR + evI * evI) / norm);
  out.hq = a2 * (uvR - (euR * evR + euI * evI) / norm);
  // Columnᴴ·residual = columnᴴy − a·columnᴴE, times conj(a).
  const uR = uyR - (aR * euR + aI * euI);
  const uI = uyI - (aI * euR - aR * euI);
  const vR = vyR - (aR * evR + aI * evI);
  const vI = vyI - (aI * evR - aR * evI);
  out.gradientH = aR * uR + aI * uI;
  out.gradientQ = aR * vR + aI * vI;
}
