import { LINEAR_PARAMETERS, type Shape } from "@/lib/numerics/resonance/magnitude-model";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";
import type { Readout } from "@/lib/numerics/resonance/types";

/** Resonance (real, positive) and offset of a magnitude sweep; b and c relative to it. */
export type MagnitudeTerms = { a: number; bRe: number; bIm: number; cRe: number; cIm: number };

const COLUMNS: number = LINEAR_PARAMETERS;
const MOST_STEPS = 30;
const SMALL_AGAINST_TIE = 1e-3;
const jacobian = new Float64Array(COLUMNS ** 2);
const values = new Float64Array(COLUMNS);
const matrix = new Float64Array(COLUMNS ** 2);
const step = new Float64Array(COLUMNS);

/**
 * The a, b, c behind the five coefficients of a power sweep, all sets of them that explain it, best first.
 *
 * With s = s₀ + κX and B = b + cs₀, C = κc:
 *
 *   α = a² + 2a(B_re + C_im),  β = 2a(B_im − C_re),  γ = |b|² − 2aC_im,  δ = 2Re(b̄c),  ε = |c|²
 *
 * The modulus leaves up to four sets: without c the two roots of a⁴ − (2α + 4γ)a² + α² + β² = 0, that is an offset that adds
 * to the resonance and one that a larger resonance goes round; and c turned to either side of b. Noise can leave no exact
 * set (γ or ε below zero): then the nearest in the metric of the data.
 *
 * @param linear The coefficients, γ without the noise's share.
 * @param metric Gram matrix of their columns: the lower triangle.
 * @param tie Sets whose costs differ by less are equally good, and the one of the smaller a comes first.
 */
export function magnitudeTerms(
  p: MagnitudeSweep,
  readout: Readout,
  { f0, q }: Shape,
  { linear, metric, tie }: { linear: Float64Array; metric: Float64Array; tie: number },
): MagnitudeTerms[] {
  const perX = p.withSlope ? f0 / (2 * q * (p.high - p.low)) : 0;
  const atF0 = p.withSlope ? (f0 - (p.low + p.high) / 2) / (p.high - p.low) : 0;
  const found = starts(linear, p.withSlope).map((start) => nearest(start, linear, metric, tie, { perX, atF0, free: p.withSlope ? 5 : 3 }));
  found.sort((one, other) => (Math.abs(one.cost - other.cost) < tie ? one.terms.a - other.terms.a : one.cost - other.cost));
  return found.map(({ terms: { a, bRe, bIm, cRe, cIm } }) =>
    // A displacement resonance is −i times a velocity resonance, to the order used here.
    readout === "velocity" ? { a, bRe, bIm, cRe, cIm } : { a, bRe: bIm, bIm: -bRe, cRe: cIm, cIm: -cRe },
  );
}

function starts([alpha, beta, gamma, delta, epsilon]: Float64Array, withSlope: boolean): MagnitudeTerms[] {
  const offset = Math.max(0, gamma);
  const half = alpha + 2 * offset;
  const root = Math.sqrt(Math.max(0, half * half - alpha * alpha - beta * beta));
  const least = 1e-6 * (Math.abs(alpha) + Math.abs(beta)) + Number.MIN_VALUE;
  return [half - root, half + root].flatMap((power) => {
    const a = Math.sqrt(Math.max(power, least));
    const bRe = (alpha - a * a) / (2 * a);
    const bIm = beta / (2 * a);
    const size = Math.hypot(bRe, bIm) || Number.MIN_VALUE;
    const along = withSlope ? delta / (2 * size) : 0;
    const across = withSlope ? Math.sqrt(Math.max(0, epsilon - along * along)) : 0;
    const [uRe, uIm] = [bRe / size, bIm / size];
    return (across > 0 ? [across, -across] : [0]).map((side) => ({ a, bRe, bIm, cRe: along * uRe - side * uIm, cIm: along * uIm + side * uRe }));
  });
}

type Narrow = { perX: number; atF0: number; free: 3 | 5 };

/** Coefficients of a set, and their derivatives row by row. */
function coefficients({ a, bRe, bIm, cRe, cIm }: MagnitudeTerms, { perX, atF0 }: Narrow): void {
  const alongA = bRe + cRe * atF0 + perX * cIm;
  const acrossA = bIm + cIm * atF0 - perX * cRe;
  values[0] = a * a + 2 * a * alongA;
  values[1] = 2 * a * acrossA;
  values[2] = bRe * bRe + bIm * bIm - 2 * a * perX * cIm;
  values[3] = 2 * (bRe * cRe + bIm * cIm);
  values[4] = cRe * cRe + cIm * cIm;
  jacobian.set([
    2 * (a + alongA), 2 * a, 0, 2 * a * atF0, 2 * a * perX,
    2 * acrossA, 0, 2 * a, -2 * a * perX, 2 * a * atF0,
    -2 * perX * cIm, 2 * bRe, 2 * bIm, 0, -2 * a * perX,
    0, 2 * cRe, 2 * cIm, 2 * bRe, 2 * bIm,
    0, 0, 0, 2 * cRe, 2 * cIm,
  ]);
}

/** Levenberg–Marquardt to the set whose coefficients come nearest. */
function nearest(start: MagnitudeTerms, linear: Float64Array, metric: Float64Array, tie: number, narrow: Narrow): { terms: MagnitudeTerms; cost: number } {
  const g = (j: number, k: number): number => (j >= k ? metric[COLUMNS * j + k] : metric[COLUMNS * k + j]);
  const costOf = (terms: MagnitudeTerms): number => {
    coefficients(terms, narrow);
    let cost = 0;
    for (let j = 0; j < COLUMNS; j++) for (let k = 0; k < COLUMNS; k++) cost += g(j, k) * (linear[j] - values[j]) * (linear[k] - values[k]);
    return cost;
  };
  const { free } = narrow;
  let terms = start;
  let cost = costOf(terms);
  let damping = 1e-3;
  for (let evaluations = 0; evaluations < MOST_STEPS && damping < 1e6; evaluations++) {
    coefficients(terms, narrow);
    const weighted = new Float64Array(COLUMNS * free); // G·J
    for (let j = 0; j < COLUMNS; j++)
      for (let l = 0; l < free; l++) for (let k = 0; k < COLUMNS; k++) weighted[free * j + l] += g(j, k) * jacobian[COLUMNS * k + l];
    for (let l = 0; l < free; l++) {
      step[l] = 0;
      for (let j = 0; j < COLUMNS; j++) step[l] += weighted[free * j + l] * (linear[j] - values[j]);
      for (let m = 0; m < free; m++) {
        let sum = 0;
        for (let j = 0; j < COLUMNS; j++) sum += jacobian[COLUMNS * j + l] * weighted[free * j + m];
        matrix[free * l + m] = sum;
      }
    }
    for (let l = 0; l < free; l++) matrix[(free + 1) * l] *= 1 + damping + 1e-9;
    if (!solveCholesky(matrix, step, free)) break;
    const next = moved(terms, step, free);
    const nextCost = costOf(next);
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
