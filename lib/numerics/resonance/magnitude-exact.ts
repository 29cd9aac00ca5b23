import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { positive, type MagnitudeTerms } from "@/lib/numerics/resonance/magnitude-terms";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";
import type { Readout } from "@/lib/numerics/resonance/types";

/** f0, Q (as shift and stretch), a, and real and imaginary part of b and c. */
const EXACT_PARAMETERS = 7;

export type ExactParameters = MagnitudeTerms & { f0: number; q: number };

export type ExactModel = {
  /** Σ w·(|z|² − model)². */
  cost: number;
  /** Normal equations, row by row. */
  gram: Float64Array;
  gradient: Float64Array;
  mean: Float64Array;
  residual: Float64Array;
};

function emptyExactModel(n: number): ExactModel {
  return {
    cost: 0, gram: new Float64Array(EXACT_PARAMETERS ** 2), gradient: new Float64Array(EXACT_PARAMETERS),
    mean: new Float64Array(n), residual: new Float64Array(n),
  };
}

const row = new Float64Array(EXACT_PARAMETERS);

/**
 * The power |aE + b + cs|² of the oscillator without any approximation, its residuals and normal equations.
 *
 * @param lift What the noise adds to the mean of every point: 2σ².
 */
function exactModel(
  { n, f, inverseF, s, power: data }: MagnitudeSweep,
  readout: Readout,
  { f0, q, a, bRe, bIm, cRe, cIm }: ExactParameters,
  { weight, lift }: { weight: Float64Array; lift: number },
  out: ExactModel,
): void {
  const displacement = readout === "displacement";
  const { gram, gradient, mean, residual } = out;
  gram.fill(0);
  gradient.fill(0);
  let cost = 0;
  for (let i = 0; i < n; i++) {
    const x = (q * (f[i] - f0) * (f[i] + f0) * inverseF[i]) / f0;
    const w = f0 * inverseF[i];
    const height = 1 / (1 + x * x);
    const lIm = -x * height;
    const eR = displacement ? w * lIm : height;
    const eI = displacement ? -w * height : lIm;
    const zR = a * eR + bRe + cRe * s[i];
    const zI = a * eI + bIm + cIm * s[i];
    // i·E·L, the common factor of both derivatives of E.
    const wR = -(eR * lIm + eI * height);
    const wI = eR * height - eI * lIm;
    const along = 2 * a * (zR * wR + zI * wI);
    const across = 2 * (zR * eR + zI * eI);
    row[0] = 0.5 * (f[i] / f0 + w) * along + (displacement ? (a * across) / (2 * q) : 0);
    row[1] = -x * along;
    row[2] = across;
    row[3] = 2 * zR;
    row[4] = 2 * zI;
    row[5] = 2 * zR * s[i];
    row[6] = 2 * zI * s[i];
    mean[i] = zR * zR + zI * zI + lift;
    const r = data[i] - mean[i];
    residual[i] = r;
    cost += weight[i] * r * r;
    for (let j = 0; j < EXACT_PARAMETERS; j++) {
      const wj = weight[i] * row[j];
      gradient[j] += wj * r;
      for (let k = 0; k <= j; k++) gram[EXACT_PARAMETERS * j + k] += wj * row[k];
    }
  }
  for (let j = 0; j < EXACT_PARAMETERS; j++) for (let k = 0; k < j; k++) gram[EXACT_PARAMETERS * k + j] = gram[EXACT_PARAMETERS * j + k];
  out.cost = cost;
}

const MOST_STEPS = 60;
/** A direction the data do not determine (the phase of hardly any offset) is held by this share of its own weight. */
const RIDGE = 1e-9;

/** Levenberg–Marquardt over all seven parameters, or five where the offset has no slope. */
export function descendExact(
  p: MagnitudeSweep,
  readout: Readout,
  start: ExactParameters,
  { weight, lift, small }: { weight: Float64Array; lift: number; small: number },
): { at: ExactParameters; model: ExactModel; settled: boolean; evaluations: number } {
  const free = freeOf(p);
  let here = emptyExactModel(p.n);
  let there = emptyExactModel(p.n);
  let at = start;
  let damping = 1e-4;
  let settled = false;
  let evaluations = 1;
  exactModel(p, readout, at, { weight, lift }, here);
  while (!settled && evaluations < MOST_STEPS && damping < 1e10 && Number.isFinite(here.cost)) {
    const matrix = raised(here.gram, free, damping + RIDGE);
    const step = here.gradient.slice(0, free);
    if (!solveCholesky(matrix, step, free)) break;
    const gain = step.reduce((sum, d, j) => sum + d * here.gradient[j], 0);
    settled = damping <= 1 && gain <= (small * here.cost) / p.n;
    const cut = Math.max(1, Math.abs(step[0]), Math.abs(step[1]));
    const d = (j: number): number => (j < free ? step[j] / cut : 0);
    const next = {
      f0: at.f0 * Math.exp(d(0) / (2 * at.q)), q: at.q * Math.exp(d(1)),
      ...positive({ a: at.a + d(2), bRe: at.bRe + d(3), bIm: at.bIm + d(4), cRe: at.cRe + d(5), cIm: at.cIm + d(6) }),
    };
    exactModel(p, readout, next, { weight, lift }, there);
    evaluations++;
    if (there.cost <= here.cost) {
      at = next;
      [here, there] = [there, here];
      damping /= 10;
    } else {
      damping = Math.max(1e-6, damping * 10);
    }
  }
  return { at, model: here, settled, evaluations };
}

function freeOf({ withSlope }: MagnitudeSweep): number {
  return withSlope ? EXACT_PARAMETERS : EXACT_PARAMETERS - 2;
}

/** The leading block of the normal equations with its diagonal raised. */
function raised(gram: Float64Array, free: number, raise: number): Float64Array {
  const block = new Float64Array(free * free);
  for (let j = 0; j < free; j++) {
    for (let k = 0; k < free; k++) block[free * j + k] = gram[EXACT_PARAMETERS * j + k];
    block[(free + 1) * j] *= 1 + raise;
  }
  return block;
}

/** Variances and covariance of (shift, ln Q), in units of the variance of a point of weight 1; undefined when they have none. */
export function exactShapeCovariance(p: MagnitudeSweep, { gram }: ExactModel): { hh: number; hq: number; qq: number } | undefined {
  const free = freeOf(p);
  const factor = raised(gram, free, RIDGE);
  const first = new Float64Array(free);
  const second = new Float64Array(free);
  first[0] = 1;
  second[1] = 1;
  if (!solveCholesky(factor.slice(), first, free) || !solveCholesky(factor, second, free)) return undefined;
  return { hh: first[0], hq: first[1], qq: second[1] };
}
