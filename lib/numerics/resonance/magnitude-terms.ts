import { LINEAR_PARAMETERS, type Shape } from "@/lib/numerics/resonance/magnitude-model";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { factorCholesky, solveCholesky } from "@/lib/numerics/resonance/small-linear";
import type { Readout } from "@/lib/numerics/resonance/types";

/** Resonance (real, positive) and offset of a magnitude sweep; b and c relative to it. */
export type MagnitudeTerms = { a: number; bRe: number; bIm: number; cRe: number; cIm: number };

const MOST_STEPS = 30;
const SMALL_AGAINST_TIE = 1e-3;
/** Numbers of columns and of parameters at most. */
const SIZE: number = LINEAR_PARAMETERS;
/** Cholesky factor L of the metric; ∂/∂parameter by parameter of the coefficients, and Lᵀ times it. */
const factor = new Float64Array(SIZE ** 2);
const jacobian = new Float64Array(SIZE ** 2);
const whitened = new Float64Array(SIZE ** 2);
const values = new Float64Array(SIZE);
const misfit = new Float64Array(SIZE);
const matrix = new Float64Array(SIZE ** 2);
const step = new Float64Array(SIZE);

export type TermsProblem = {
  /** The coefficients, γ without the noise's share. */
  linear: Float64Array;
  /** Gram matrix of their columns: the lower triangle. */
  metric: Float64Array;
  /** Sets whose costs differ by less are equally good, and the one of the smaller a comes first. */
  tie: number;
};

/**
 * The a, b, c behind the five coefficients of a power sweep: sets of them that explain it, best first.
 *
 * With s = s₀ + κX and B = b + cs₀, C = κc:
 *
 *   α = a² + 2a(B_re + C_im),  β = 2a(B_im − C_re),  γ = |b|² − 2aC_im,  δ = 2Re(b̄c),  ε = |c|²
 *
 * The modulus leaves up to four sets: without c the two roots of a⁴ − (2α + 4γ)a² + α² + β² = 0, that is an offset that adds
 * to the resonance and one that a larger resonance goes round; and c turned to either side of b. Noise can leave no exact
 * set (γ or ε below zero): then the nearest in the metric of the data.
 *
 * @returns The sets of the smaller root if one of them explains the coefficients, else of both; all sets with `all`. None when
 *   the metric is not positive definite.
 */
export function magnitudeTerms(p: MagnitudeSweep, readout: Readout, { f0, q }: Shape, { linear, metric, tie }: TermsProblem, all = false): MagnitudeTerms[] {
  factor.set(metric);
  if (!factorCholesky(factor, SIZE)) return [];
  const perX = p.withSlope ? f0 / (2 * q * (p.high - p.low)) : 0;
  const atF0 = p.withSlope ? (f0 - (p.low + p.high) / 2) / (p.high - p.low) : 0;
  const free = p.withSlope ? 5 : 3;
  const found: { terms: MagnitudeTerms; cost: number }[] = [];
  for (const sign of [-1, 1]) {
    if (!all && found.some(({ cost }) => cost < tie)) break;
    for (const start of starts(linear, sign, p.withSlope)) found.push(nearest(start, linear, tie, { perX, atF0, free }));
  }
  found.sort((one, other) => (Math.abs(one.cost - other.cost) < tie ? one.terms.a - other.terms.a : one.cost - other.cost));
  return found.map(({ terms: { a, bRe, bIm, cRe, cIm } }) =>
    // A displacement resonance is −i times a velocity resonance, to the order used here.
    readout === "velocity" ? { a, bRe, bIm, cRe, cIm } : { a, bRe: bIm, bIm: -bRe, cRe: cIm, cIm: -cRe },
  );
}

/** Sets to start from, by one root for a² and, where there is a slope, c to either side of b. */
function starts([alpha, beta, gamma, delta, epsilon]: Float64Array, sign: number, withSlope: boolean): MagnitudeTerms[] {
  const offset = Math.max(0, gamma);
  const half = alpha + 2 * offset;
  const power = half + sign * Math.sqrt(Math.max(0, half * half - alpha * alpha - beta * beta));
  const a = Math.sqrt(Math.max(power, 1e-6 * (Math.abs(alpha) + Math.abs(beta)) + Number.MIN_VALUE));
  const bRe = (alpha - a * a) / (2 * a);
  const bIm = beta / (2 * a);
  const size = Math.hypot(bRe, bIm) || Number.MIN_VALUE;
  const along = withSlope ? delta / (2 * size) : 0;
  const across = withSlope ? Math.sqrt(Math.max(0, epsilon - along * along)) : 0;
  const [uRe, uIm] = [bRe / size, bIm / size];
  return (across > 0 ? [across, -across] : [0]).map((side) => ({ a, bRe, bIm, cRe: along * uRe - side * uIm, cIm: along * uIm + side * uRe }));
}

type Narrow = { perX: number; atF0: number; free: 3 | 5 };

/** Fills `values` with the coefficients of a set. */
function setValues({ a, bRe, bIm, cRe, cIm }: MagnitudeTerms, { perX, atF0 }: Narrow): void {
  values[0] = a * a + 2 * a * (bRe + cRe * atF0 + perX * cIm);
  values[1] = 2 * a * (bIm + cIm * atF0 - perX * cRe);
  values[2] = bRe * bRe + bIm * bIm - 2 * a * perX * cIm;
  values[3] = 2 * (bRe * cRe + bIm * cIm);
  values[4] = cRe * cRe + cIm * cIm;
}

/** Fills `jacobian`, one parameter a row: a, b and c. */
function setJacobian({ a, bRe, bIm, cRe, cIm }: MagnitudeTerms, { perX, atF0 }: Narrow): void {
  jacobian[0] = 2 * (a + bRe + cRe * atF0 + perX * cIm);
  jacobian[1] = 2 * (bIm + cIm * atF0 - perX * cRe);
  jacobian[2] = -2 * perX * cIm;
  jacobian[5] = 2 * a;
  jacobian[7] = 2 * bRe;
  jacobian[8] = 2 * cRe;
  jacobian[11] = 2 * a;
  jacobian[12] = 2 * bIm;
  jacobian[13] = 2 * cIm;
  jacobian[15] = 2 * a * atF0;
  jacobian[16] = -2 * a * perX;
  jacobian[18] = 2 * bRe;
  jacobian[19] = 2 * cRe;
  jacobian[20] = 2 * a * perX;
  jacobian[21] = 2 * a * atF0;
  jacobian[22] = -2 * a * perX;
  jacobian[23] = 2 * bIm;
  jacobian[24] = 2 * cIm;
}

/** Lᵀ times five numbers of `from`, which begin at `offset`. */
function whiten(from: Float64Array, to: Float64Array, offset = 0): void {
  for (let j = 0; j < SIZE; j++) {
    let sum = 0;
    for (let k = j; k < SIZE; k++) sum += factor[SIZE * k + j] * from[offset + k];
    to[offset + j] = sum;
  }
}

/** Distance of a set's coefficients; leaves the whitened misfit in `misfit`. */
function costOf(terms: MagnitudeTerms, linear: Float64Array, narrow: Narrow): number {
  setValues(terms, narrow);
  for (let j = 0; j < SIZE; j++) values[j] = linear[j] - values[j];
  whiten(values, misfit);
  let cost = 0;
  for (let j = 0; j < SIZE; j++) cost += misfit[j] * misfit[j];
  return cost;
}

/** Levenberg–Marquardt to the set whose coefficients come nearest. */
function nearest(start: MagnitudeTerms, linear: Float64Array, tie: number, narrow: Narrow): { terms: MagnitudeTerms; cost: number } {
  const { free } = narrow;
  let terms = start;
  let cost = costOf(terms, linear, narrow);
  let damping = 1e-3;
  for (let k = 0; k < MOST_STEPS && damping < 1e6 && cost > SMALL_AGAINST_TIE * tie; k++) {
    costOf(terms, linear, narrow);
    setJacobian(terms, narrow);
    for (let l = 0; l < free; l++) whiten(jacobian, whitened, SIZE * l);
    for (let l = 0; l < free; l++) {
      let along = 0;
      for (let j = 0; j < SIZE; j++) along += whitened[SIZE * l + j] * misfit[j];
      step[l] = along;
      for (let m = 0; m <= l; m++) {
        let sum = 0;
        for (let j = 0; j < SIZE; j++) sum += whitened[SIZE * l + j] * whitened[SIZE * m + j];
        matrix[free * l + m] = sum;
      }
    }
    for (let l = 0; l < free; l++) matrix[(free + 1) * l] *= 1 + damping + 1e-9;
    if (!solveCholesky(matrix, step, free)) break;
    const next = moved(terms, step, free);
    const nextCost = costOf(next, linear, narrow);
    if (nextCost < cost) {
      const gained = cost - nextCost;
      terms = next;
      cost = nextCost;
      damping /= 10;
      if (gained <= SMALL_AGAINST_TIE * tie) break;
    } else {
      damping *= 10;
    }
  }
  return { terms, cost };
}

function moved({ a, bRe, bIm, cRe, cIm }: MagnitudeTerms, d: Float64Array, free: number): MagnitudeTerms {
  const slope = free > 3 ? { cRe: cRe + d[3], cIm: cIm + d[4] } : { cRe, cIm };
  return positive({ a: a + d[0], bRe: bRe + d[1], bIm: bIm + d[2], ...slope });
}

/** The modulus is the same for the whole turned by half a circle: a is kept positive. */
export function positive(terms: MagnitudeTerms): MagnitudeTerms {
  if (terms.a >= 0) return terms;
  return { a: -terms.a, bRe: -terms.bRe, bIm: -terms.bIm, cRe: -terms.cRe, cIm: -terms.cIm };
}
