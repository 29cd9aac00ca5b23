import { bentPower } from "@/lib/numerics/resonance/bent-model";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { backSubstitute, factorCholesky, forwardSubstitute } from "@/lib/numerics/resonance/small-linear";

/** Order of the iterated parameters: shift of f0 in half-widths, ln Q, bend. */
export const SHAPE_PARAMETERS = 3;
/** Order of the linear ones, coefficients of P, D, 1, s and s². */
export const LINEAR_PARAMETERS = 5;

export type Shape = { f0: number; q: number; bend: number };

/** The separable least-squares problem of a power sweep at one shape. */
export type MagnitudeModel = {
  /** Σ w·(|z|² − model)². */
  cost: number;
  /** Coefficients of the five columns. */
  linear: Float64Array;
  /** Gram matrix of the five columns: the lower triangle. */
  linearGram: Float64Array;
  /** Gram matrix of the derivative columns with the five projected out, and their products with the residual. */
  gram: Float64Array;
  gradient: Float64Array;
  /** The model, and |z|² less the model, point by point. */
  mean: Float64Array;
  residual: Float64Array;
};

export function emptyMagnitudeModel(n: number): MagnitudeModel {
  return {
    cost: 0,
    linear: new Float64Array(LINEAR_PARAMETERS),
    linearGram: new Float64Array(LINEAR_PARAMETERS ** 2),
    gram: new Float64Array(SHAPE_PARAMETERS ** 2),
    gradient: new Float64Array(SHAPE_PARAMETERS),
    mean: new Float64Array(n),
    residual: new Float64Array(n),
  };
}

const factor = new Float64Array(LINEAR_PARAMETERS ** 2);
const cross = new Float64Array(SHAPE_PARAMETERS * LINEAR_PARAMETERS);
/** P, X and dX/dx of each point, from the first pass to the second. */
let scratch = new Float64Array(3 * 1024);

/**
 * The power of an oscillator with an offset, linear in all but f0 and Q.
 *
 *   |V|² = αP + βD + γ + δs + εs²,   P = 1/(1 + X²),   D = −X·P,   X = Q(f/f0 − f0/f) − k·w³·P,   w = f0/f
 *
 * Multiplied by 1 + X², |a/(1 + iX) + b + cs|² is a real polynomial of fourth degree with five free coefficients where s is
 * linear in X, so a, b and c (five numbers, their common phase being lost) and α … ε are the same thing; so it is to order
 * (span/f0)³ for either readout. k is the bend of bentModel, in half-widths, 0 for a straight oscillator.
 *
 * @param weight Weight of each point, inverse to the variance of its |V|².
 * @returns false when the five columns are not independent over the sweep.
 *
 * Source: Golub & Pereyra, SIAM J. Numer. Anal. 10 (1973) 413; Kaufman, BIT 15 (1975) 49. Two passes, no allocation.
 */
export function magnitudeModel(p: MagnitudeSweep, { f0, q, bend: k }: Shape, weight: Float64Array, out: MagnitudeModel): boolean {
  return !Number.isNaN(fitLinear(p, f0, q, k, weight, out)) && fitShape(p, f0, k, weight, out);
}

/** What the five columns explain of Σ w·|V|⁴ at one shape, for comparing shapes: −Infinity when they are not independent. */
export function explainedPower(p: MagnitudeSweep, { f0, q, bend }: Shape, weight: Float64Array, out: MagnitudeModel): number {
  const explained = fitLinear(p, f0, q, bend, weight, out);
  return Number.isNaN(explained) ? -Infinity : explained;
}

/** First pass: the five coefficients. Returns what they explain, NaN when they are not determined. */
function fitLinear({ n, f, inverseF, s, power, withSlope, descending }: MagnitudeSweep, f0: number, q: number, k: number, weight: Float64Array, out: MagnitudeModel): number {
  if (scratch.length < 3 * n) scratch = new Float64Array(6 * n);
  const scale = q / f0;
  const places = scratch;
  let near = 0.5;
  let pp = 0, pd = 0, dd = 0, p1 = 0, d1 = 0, p2 = 0, d2 = 0, p3 = 0, d3 = 0, yp = 0, yd = 0;
  let s0 = 0, s1 = 0, s2 = 0, s3 = 0, s4 = 0, y0 = 0, y1 = 0, y2 = 0;
  for (let step = 0; step < n; step++) {
    const i = descending ? n - 1 - step : step;
    let x = scale * (f[i] - f0) * (f[i] + f0) * inverseF[i];
    let height = 1 / (1 + x * x);
    let gain = 1;
    if (k !== 0) {
      const w = f0 * inverseF[i];
      const bend = k * w * w * w;
      height = near = bentPower(x, bend, near);
      x -= bend * height;
      const steep = 1 - 2 * bend * x * height * height;
      gain = 1 / (Math.abs(steep) < 0.05 ? 0.05 : steep); // at a fold the derivative has no bound
    }
    places[3 * i] = height;
    places[3 * i + 1] = x;
    places[3 * i + 2] = gain;
    const t = s[i];
    const w0 = weight[i];
    const wp = w0 * height;
    const wd = -x * wp;
    const wt = w0 * t;
    const wtt = wt * t;
    const y = power[i];
    pp += wp * height;
    pd += wd * height;
    dd -= wd * x * height;
    p1 += wp;
    d1 += wd;
    p2 += wp * t;
    d2 += wd * t;
    p3 += wp * t * t;
    d3 += wd * t * t;
    yp += wp * y;
    yd += wd * y;
    s0 += w0;
    s1 += wt;
    s2 += wtt;
    s3 += wtt * t;
    s4 += wtt * t * t;
    y0 += w0 * y;
    y1 += wt * y;
    y2 += wtt * y;
  }
  const { linear, linearGram: g } = out;
  g[0] = pp;
  g[5] = pd;
  g[6] = dd;
  g[10] = p1;
  g[11] = d1;
  g[12] = s0;
  g[15] = p2;
  g[16] = d2;
  g[17] = s1;
  g[18] = withSlope ? s2 : 1;
  g[20] = p3;
  g[21] = d3;
  g[22] = s2;
  g[23] = s3;
  g[24] = withSlope ? s4 : 1;
  linear[0] = yp;
  linear[1] = yd;
  linear[2] = y0;
  linear[3] = y1;
  linear[4] = y2;
  factor.set(g);
  if (!factorCholesky(factor, LINEAR_PARAMETERS)) return NaN;
  forwardSubstitute(factor, linear, LINEAR_PARAMETERS);
  let explained = 0;
  for (let j = 0; j < LINEAR_PARAMETERS; j++) explained += linear[j] * linear[j];
  backSubstitute(factor, linear, LINEAR_PARAMETERS);
  return explained;
}

/** Second pass: residuals, formed point by point, and the normal equations of the next step. */
function fitShape({ n, f, inverseF, s, power }: MagnitudeSweep, f0: number, k: number, weight: Float64Array, out: MagnitudeModel): boolean {
  const { mean, residual, gram, gradient } = out;
  const [alpha, beta, gamma, delta, epsilon] = out.linear;
  const inverseF0 = 1 / f0;
  let cost = 0, hh = 0, hq = 0, qq = 0, hk = 0, qk = 0, kk = 0, hr = 0, qr = 0, kr = 0;
  // Products of the three derivative columns with the five linear ones.
  let hP = 0, hD = 0, h1 = 0, hS = 0, hT = 0;
  let qP = 0, qD = 0, q1 = 0, qS = 0, qT = 0;
  let kP = 0, kD = 0, k1 = 0, kS = 0, kT = 0;
  const places = scratch;
  for (let i = 0; i < n; i++) {
    const height = places[3 * i];
    const x = places[3 * i + 1];
    const gain = places[3 * i + 2];
    const t = s[i];
    const d = -x * height;
    mean[i] = alpha * height + beta * d + gamma + t * (delta + t * epsilon);
    const r = power[i] - mean[i];
    residual[i] = r;
    const w0 = weight[i];
    cost += w0 * r * r;
    const w = f0 * inverseF[i];
    const lift = w * w * w * height;
    // ∂P/∂X = −2X·P², ∂D/∂X = P(1 − 2P); the straight x is X + k·lift.
    const along = gain * height * (2 * alpha * d + beta * (1 - 2 * height));
    const ch = -0.5 * (f[i] * inverseF0 + w) * along;
    const cq = (x + k * lift) * along;
    const ck = -lift * along;
    const wh = w0 * ch;
    const wq = w0 * cq;
    const wk = w0 * ck;
    hh += wh * ch;
    hq += wh * cq;
    qq += wq * cq;
    hk += wh * ck;
    qk += wq * ck;
    kk += wk * ck;
    hr += wh * r;
    qr += wq * r;
    kr += wk * r;
    const tt = t * t;
    hP += wh * height;
    hD += wh * d;
    h1 += wh;
    hS += wh * t;
    hT += wh * tt;
    qP += wq * height;
    qD += wq * d;
    q1 += wq;
    qS += wq * t;
    qT += wq * tt;
    kP += wk * height;
    kD += wk * d;
    k1 += wk;
    kS += wk * t;
    kT += wk * tt;
  }
  out.cost = cost;
  gradient[0] = hr;
  gradient[1] = qr;
  gradient[2] = kr;
  gram[0] = hh;
  gram[3] = hq;
  gram[4] = qq;
  gram[6] = hk;
  gram[7] = qk;
  gram[8] = kk;
  cross.set([hP, hD, h1, hS, hT, qP, qD, q1, qS, qT, kP, kD, k1, kS, kT]);
  for (let j = 0; j < SHAPE_PARAMETERS; j++) {
    forwardSubstitute(factor, cross, LINEAR_PARAMETERS, LINEAR_PARAMETERS * j);
    for (let l = 0; l <= j; l++) {
      let shared = 0;
      for (let m = 0; m < LINEAR_PARAMETERS; m++) shared += cross[LINEAR_PARAMETERS * j + m] * cross[LINEAR_PARAMETERS * l + m];
      gram[SHAPE_PARAMETERS * j + l] -= shared;
      gram[SHAPE_PARAMETERS * l + j] = gram[SHAPE_PARAMETERS * j + l];
    }
  }
  return Number.isFinite(cost);
}
