import type { PreparedSweep } from "@/lib/numerics/resonance/prepare";
import type { Readout } from "@/lib/numerics/resonance/types";

/** Order of the parameters: shift of f0 in half-widths, ln Q, bend. */
export const BENT_PARAMETERS = 3;

/** Normal equations of the bent oscillator at one point, a and offset projected out. */
export type BentModel = {
  cost: number;
  /** Gram matrix of the projected derivative columns, row by row. */
  gram: Float64Array;
  /** Projected derivative columns times the residual. */
  gradient: Float64Array;
};

export function emptyBentModel(): BentModel {
  return { cost: 0, gram: new Float64Array(BENT_PARAMETERS ** 2), gradient: new Float64Array(BENT_PARAMETERS) };
}

/**
 * The root ρ in (0, 1] of ρ(1 + (x − bend·ρ)²) = 1 that Newton's method reaches from `near`, kept within its bracket.
 * Beyond bend ≈ 1.54 there can be three; a sweep stays on the branch it came along, so `near` is the last point's ρ.
 */
export function bentPower(x: number, bend: number, near: number): number {
  if (bend === 0) return 1 / (1 + x * x);
  let low = 0;
  let high = 1;
  let power = near;
  for (let k = 0; k < 60; k++) {
    const d = x - bend * power;
    const value = power * (1 + d * d) - 1;
    if (value > 0) high = power;
    else low = power;
    const slope = 1 + d * d - 2 * bend * power * d;
    let next = power - value / slope;
    if (!(next >= low && next <= high)) next = (low + high) / 2;
    if (Math.abs(next - power) < 1e-14) return next;
    power = next;
  }
  return power;
}

// Per parameter: sums with the constant, the slope, E and y; shared because one sweep is fitted at a time.
const sums = new Float64Array(8 * BENT_PARAMETERS);
const weights = new Float64Array(BENT_PARAMETERS);
const squares = new Float64Array(BENT_PARAMETERS ** 2);

/**
 * The oscillator whose stiffness follows its amplitude: f0² → f0²(1 + 2ε|x|²/|x|²max), in harmonic balance.
 *
 *   X = Q(f/f0 − f0/f) − k·w·|x|²,   |x|² = w²/(1 + X²),   w = f0/f,   k = 2Qε
 *
 * k is the shift of the peak in half-widths, positive for hardening. With X in place of x everything is as in
 * projectedModel; the derivative columns are one complex column W times the real factors g, −x and w|x|².
 *
 * Source: Landau & Lifshitz, Mechanics, §29 (forced anharmonic oscillation); projection as in projectedModel.
 */
export function bentModel(p: PreparedSweep, readout: Readout, f0: number, q: number, k: number, out: BentModel): void {
  const { n, f, inverseF, slope, re, im } = p;
  const displacement = readout === "displacement";
  const scale = q / f0;
  sums.fill(0);
  squares.fill(0);
  let e1R = 0, e1I = 0, esR = 0, esI = 0, ee = 0, eyR = 0, eyI = 0;
  let near = 0.5;
  for (let step = 0; step < n; step++) {
    const i = p.descending ? n - 1 - step : step;
    const x = scale * (f[i] - f0) * (f[i] + f0) * inverseF[i];
    const w = f0 * inverseF[i];
    const bend = k * w * w * w;
    const power = bentPower(x, bend, near);
    near = power;
    const shifted = x - bend * power;
    const lI = -shifted * power;
    const eR = displacement ? w * lI : power;
    const eI = displacement ? -w * power : lI;
    const steep = 1 - 2 * bend * shifted * power * power;
    const gain = 1 / (Math.abs(steep) < 0.05 ? 0.05 : steep); // at a fold the derivative has no bound
    const wR = -gain * (eR * lI + eI * power);
    const wI = gain * (eR * power - eI * lI);
    weights[0] = 0.5 * (f[i] / f0 + w);
    weights[1] = -x;
    weights[2] = w * w * w * power;
    const s = slope[i];
    e1R += eR;
    e1I += eI;
    esR += s * eR;
    esI += s * eI;
    ee += eR * eR + eI * eI;
    eyR += eR * re[i] + eI * im[i];
    eyI += eR * im[i] - eI * re[i];
    const ewR = eR * wR + eI * wI;
    const ewI = eR * wI - eI * wR;
    const wyR = wR * re[i] + wI * im[i];
    const wyI = wR * im[i] - wI * re[i];
    const ww = wR * wR + wI * wI;
    for (let j = 0; j < BENT_PARAMETERS; j++) {
      const c = weights[j];
      const o = 8 * j;
      sums[o] += c * wR;
      sums[o + 1] += c * wI;
      sums[o + 2] += c * s * wR;
      sums[o + 3] += c * s * wI;
      sums[o + 4] += c * ewR;
      sums[o + 5] += c * ewI;
      sums[o + 6] += c * wyR;
      sums[o + 7] += c * wyI;
      for (let l = 0; l <= j; l++) squares[BENT_PARAMETERS * j + l] += c * weights[l] * ww;
    }
  }

  const norm = ee - (e1R * e1R + e1I * e1I) / n - esR * esR - esI * esI;
  const aR = eyR / norm;
  const aI = eyI / norm;
  const a2 = aR * aR + aI * aI;
  out.cost = p.energy - a2 * norm;
  for (let j = 0; j < BENT_PARAMETERS; j++) {
    const o = 8 * j;
    // EᴴW without constant and slope.
    sums[o + 4] -= (e1R * sums[o] + e1I * sums[o + 1]) / n + esR * sums[o + 2] + esI * sums[o + 3];
    sums[o + 5] -= (e1R * sums[o + 1] - e1I * sums[o]) / n + esR * sums[o + 3] - esI * sums[o + 2];
    const rR = sums[o + 6] - (aR * sums[o + 4] + aI * sums[o + 5]);
    const rI = sums[o + 7] - (aI * sums[o + 4] - aR * sums[o + 5]);
    out.gradient[j] = aR * rR + aI * rI;
    for (let l = 0; l <= j; l++) {
      const m = 8 * l;
      const value =
        squares[BENT_PARAMETERS * j + l] -
        (sums[o] * sums[m] + sums[o + 1] * sums[m + 1]) / n -
        (sums[o + 2] * sums[m + 2] + sums[o + 3] * sums[m + 3]) -
        (sums[o + 4] * sums[m + 4] + sums[o + 5] * sums[m + 5]) / norm;
      out.gram[BENT_PARAMETERS * j + l] = a2 * value;
      out.gram[BENT_PARAMETERS * l + j] = a2 * value;
    }
  }
}
