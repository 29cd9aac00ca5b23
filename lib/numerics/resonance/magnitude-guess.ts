import { emptyMagnitudeModel, explainedPower, type Shape } from "@/lib/numerics/resonance/magnitude-model";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";

const PASSES = 3;
/** Two coefficients of the denominator, five of the numerator. */
const UNKNOWNS = 7;
const matrix = new Float64Array(UNKNOWNS ** 2);
const right = new Float64Array(UNKNOWNS);
/** Σ w·tᵏ, Σ w·|V|²·tᵏ and Σ w·|V|⁴·tᵏ. */
const plain = new Float64Array(9);
const once = new Float64Array(7);
const twice = new Float64Array(4);

/**
 * First guess by a rational function.
 *
 * Near resonance |V|² = N(t)/(t² + d₁t + d₀), N of fourth degree, t = (f − fm)/(half the span). Multiplied out it is linear in
 * d₁, d₀ and N; the poles −d₁/2 ± i√(d₀ − d₁²/4) are centre and half-width. Weighting by the square of the last denominator
 * gives the residual its even variance back.
 *
 * @param weight Weight of each point, inverse to the variance of its |V|².
 * @returns undefined when the poles are real or not finite.
 *
 * Source: Levy, IRE Trans. Autom. Control 4 (1959) 37; weights of Sanathanan & Koerner, IEEE Trans. Autom. Control 8
 * (1963) 56.
 */
export function rationalGuess(p: MagnitudeSweep, weight: Float64Array): Shape | undefined {
  const middle = (p.low + p.high) / 2;
  const half = (p.high - p.low) / 2;
  let centre = 0;
  let square = Infinity; // of the half-width; even weights at first
  for (let pass = 0; pass < PASSES; pass++) {
    sumMoments(p, weight, middle, half, centre, square);
    if (!solveMoments(p.withSlope)) return undefined;
    centre = -right[0] / 2;
    square = right[1] - centre * centre;
    if (!(square > 0) && pass === PASSES - 1) return undefined;
    centre = Math.max(-1, Math.min(1, centre));
    square = Math.max((0.5 / p.n) ** 2, Math.min(16, Math.abs(square)));
    if (!Number.isFinite(square)) return undefined;
  }
  const f0 = middle + centre * half;
  return { f0, q: f0 / (2 * Math.sqrt(square) * half), bend: 0 };
}

function sumMoments({ n, f, power }: MagnitudeSweep, weight: Float64Array, middle: number, half: number, centre: number, square: number): void {
  plain.fill(0);
  once.fill(0);
  twice.fill(0);
  const even = square === Infinity;
  for (let i = 0; i < n; i++) {
    const t = (f[i] - middle) / half;
    const d = even ? 1 : (t - centre) ** 2 + square;
    const y = power[i];
    let w = weight[i] / (d * d);
    for (let k = 0; k < 9; k++) {
      plain[k] += w;
      if (k < 7) once[k] += w * y;
      if (k < 4) twice[k] += w * y * y;
      w *= t;
    }
  }
}

/** Columns −|V|²·t, −|V|², 1, t, t², t³, t⁴ against |V|²·t². Without a slope N is of second degree. */
function solveMoments(withSlope: boolean): boolean {
  const degree = withSlope ? 4 : 2;
  matrix.fill(0);
  right.fill(0);
  matrix[0] = twice[2];
  matrix[UNKNOWNS] = twice[1];
  matrix[UNKNOWNS + 1] = twice[0];
  right[0] = -twice[3];
  right[1] = -twice[2];
  for (let j = 0; j <= 4; j++) {
    const row = UNKNOWNS * (2 + j);
    if (j > degree) {
      matrix[row + 2 + j] = 1;
      continue;
    }
    matrix[row] = -once[j + 1];
    matrix[row + 1] = -once[j];
    for (let l = 0; l <= j; l++) matrix[row + 2 + l] = plain[j + l];
    right[2 + j] = once[j + 2];
  }
  return solveCholesky(matrix, right, UNKNOWNS);
}

/** Half-widths sought all over the sweep, as fractions of the span; a centre each SPACING of them. */
const WIDE = [1, 0.5, 0.28, 0.16, 0.09, 0.05, 0.028];
const SPACING = 0.7;
const COARSE_POINTS = 64;

/** First guess from a coarse grid of centres and half-widths, the best by projected cost. */
export function wideGuess(p: MagnitudeSweep, weight: Float64Array): { shape: Shape; evaluations: number } {
  const span = p.high - p.low;
  return bestOf(
    p,
    weight,
    WIDE.flatMap((share) => {
      const intervals = Math.ceil(1 / (SPACING * share));
      return Array.from({ length: intervals + 1 }, (_, k) => shapeOf(p.low + (k / intervals) * span, share * span));
    }),
  );
}

/** Narrow resonances are sought where the data stand out most, at half-widths down to half a point spacing. */
const PEAKS = 8;

/** First guess for a resonance narrow against the sweep. */
export function narrowGuess(p: MagnitudeSweep, weight: Float64Array): { shape: Shape; evaluations: number } {
  const span = p.high - p.low;
  const shapes: Shape[] = [];
  const peaks = standingOut(p);
  for (let halfWidth = 0.02 * span; halfWidth > span / (2 * p.n); halfWidth /= 2) {
    for (const f0 of peaks) for (let k = -1; k <= 1; k++) shapes.push(shapeOf(f0 + (k * halfWidth) / 2, halfWidth));
  }
  return bestOf(p, weight, shapes.length > 0 ? shapes : [shapeOf(peaks[0] ?? p.low, 0.02 * span)]);
}

const shapeOf = (f0: number, halfWidth: number): Shape => ({ f0, q: f0 / (2 * halfWidth), bend: 0 });

function bestOf(p: MagnitudeSweep, weight: Float64Array, shapes: Shape[]): { shape: Shape; evaluations: number } {
  const model = emptyMagnitudeModel(0);
  let [shape] = shapes;
  let most = -Infinity;
  for (const trial of shapes) {
    const explained = explainedPower(p, trial, weight, model);
    if (explained <= most) continue;
    most = explained;
    shape = trial;
  }
  return { shape, evaluations: shapes.length };
}

/** The sweep in blocks of neighbouring points, about COARSE_POINTS of them. */
export function averaged(p: MagnitudeSweep, weight: Float64Array): { sweep: MagnitudeSweep; weight: Float64Array } {
  const length = Math.max(1, Math.floor(p.n / COARSE_POINTS));
  const n = Math.floor(p.n / length);
  const mean = (column: Float64Array): Float64Array => {
    const out = new Float64Array(n);
    for (let i = 0; i < n * length; i++) out[Math.floor(i / length)] += column[i] / length;
    return out;
  };
  const f = mean(p.f);
  return { sweep: { ...p, n, f, inverseF: f.map((v) => 1 / v), s: mean(p.s), power: mean(p.power) }, weight: mean(weight) };
}

/** Frequencies where the data stand out most from their median, up or down. */
function standingOut({ n, f, power }: MagnitudeSweep): number[] {
  const median = power.slice().sort()[n >> 1];
  const height = (i: number): number => (i < 0 || i >= n ? 0 : Math.abs(power[i] - median));
  const found: number[] = [];
  for (let i = 0; i < n; i++) if (height(i) >= height(i - 1) && height(i) > height(i + 1)) found.push(i);
  return found.sort((i, j) => height(j) - height(i)).slice(0, PEAKS).map((i) => f[i]);
}
