import { factorCholesky, forwardSubstitute, backSubstitute } from "@/lib/numerics/resonance/small-linear";

/** Angle ω and decay γ, both per sample; bend in half-widths, see decayModel. */
export type Decay = { omega: number; gamma: number; bend: number };

/** Order of the iterated parameters: ω and γ, each times the number of samples, bend. */
export const DECAY_PARAMETERS = 3;
const LINEAR = 3;

/** The separable least-squares problem of a decaying tone. */
export type DecayModel = {
  /** Σr² formed sample by sample, Σy² about the mean, and lag-1 autocorrelation of the residuals. */
  squares: number;
  energy: number;
  lag1: number;
  /** v = e^(−γj)(cosine·cos φ + sine·sin φ) + constant, j counting samples. */
  cosine: number;
  sine: number;
  constant: number;
  /** Gram matrix of the derivative columns with the linear ones projected out, and their products with the residual. */
  gram: Float64Array;
  gradient: Float64Array;
};

export function emptyDecayModel(): DecayModel {
  return {
    squares: 0, energy: 0, lag1: 0, cosine: 0, sine: 0, constant: 0,
    gram: new Float64Array(DECAY_PARAMETERS ** 2), gradient: new Float64Array(DECAY_PARAMETERS),
  };
}

/** The tone is carried on by turning a phasor, and set right from its angle this often. */
const TURNS = 128;
/** Residuals this small against the data are rounding and say nothing. */
const ROUNDING = 2 ** -40;
const factor = new Float64Array(LINEAR ** 2);
const linear = new Float64Array(LINEAR);
const cross = new Float64Array(DECAY_PARAMETERS * LINEAR);
/** Cosine and sine columns, from the first pass to the second. */
let workspace = new Float64Array(2 * 4096);

/**
 * A free decay whose frequency follows its amplitude, linear in all but ω, γ and the bend.
 *
 *   v = h·(A cos φ + B sin φ) + b,   h = e^(−γj),   φ = ωj + (k/2)(1 − h²)
 *
 * k is the shift of the frequency at the first sample in half-widths γ, positive for hardening: dφ/dj = ω + kγh².
 *
 * @returns false when the columns do not determine the linear part.
 *
 * Source: Landau & Lifshitz, Mechanics, §28 (anharmonic oscillation: the shift goes with the square of the amplitude);
 * projection after Golub & Pereyra, SIAM J. Numer. Anal. 10 (1973) 413. Two passes over the samples.
 */
export function decayModel(y: Float64Array, decay: Decay, out: DecayModel): boolean {
  if (workspace.length < 2 * y.length) workspace = new Float64Array(4 * y.length);
  fillTone(y.length, decay, workspace);
  return fitLinear(y, workspace, out) && fitShape(y, workspace, decay, out) && Number.isFinite(out.squares);
}

function fillTone(n: number, { omega, gamma, bend }: Decay, tone: Float64Array): void {
  const shrink = Math.exp(-gamma);
  const turnR = shrink * Math.cos(omega);
  const turnI = shrink * Math.sin(omega);
  let c = 1;
  let s = 0;
  for (let i = 0; i < n; i++) {
    if (i % TURNS === 0) {
      const height = Math.exp(-gamma * i);
      c = height * Math.cos(omega * i);
      s = height * Math.sin(omega * i);
    }
    tone[2 * i] = c;
    tone[2 * i + 1] = s;
    if (bend !== 0) {
      const turned = 0.5 * bend * (1 - c * c - s * s);
      const cos = Math.cos(turned);
      const sin = Math.sin(turned);
      tone[2 * i] = c * cos - s * sin;
      tone[2 * i + 1] = c * sin + s * cos;
    }
    const next = c * turnR - s * turnI;
    s = c * turnI + s * turnR;
    c = next;
  }
}

/** First pass: A, B and the constant. */
function fitLinear(y: Float64Array, tone: Float64Array, out: DecayModel): boolean {
  const n = y.length;
  let mean = 0;
  for (let i = 0; i < n; i++) mean += y[i];
  mean /= n;
  let cc = 0, cs = 0, ss = 0, c1 = 0, s1 = 0, cy = 0, sy = 0, energy = 0;
  for (let i = 0; i < n; i++) {
    const c = tone[2 * i];
    const s = tone[2 * i + 1];
    const v = y[i] - mean;
    cc += c * c;
    cs += c * s;
    ss += s * s;
    c1 += c;
    s1 += s;
    cy += c * v;
    sy += s * v;
    energy += v * v;
  }
  factor.set([cc, 0, 0, cs, ss, 0, c1, s1, n]);
  linear.set([cy, sy, 0]);
  if (!factorCholesky(factor, LINEAR)) return false;
  forwardSubstitute(factor, linear, LINEAR);
  backSubstitute(factor, linear, LINEAR);
  out.energy = energy;
  out.cosine = linear[0];
  out.sine = linear[1];
  out.constant = linear[2] + mean;
  return true;
}

/** Second pass: residuals, formed sample by sample, and the normal equations of the next step. */
function fitShape(y: Float64Array, tone: Float64Array, { bend }: Decay, out: DecayModel): boolean {
  const n = y.length;
  const { cosine: a, sine: b, constant, gram, gradient } = out;
  let squares = 0, products = 0, last = 0;
  let ww = 0, wg = 0, gg = 0, wk = 0, gk = 0, kk = 0, wr = 0, gr = 0, kr = 0;
  let wc = 0, ws = 0, w1 = 0, gc = 0, gs = 0, g1 = 0, kc = 0, ks = 0, k1 = 0;
  for (let i = 0; i < n; i++) {
    const c = tone[2 * i];
    const s = tone[2 * i + 1];
    const v = a * c + b * s;
    const u = b * c - a * s; // a quarter turn ahead
    const r = y[i] - constant - v;
    squares += r * r;
    products += r * last;
    last = r;
    const t = i / n;
    const power = c * c + s * s;
    const w = t * u;
    const g = t * (bend * power * u - v);
    const k = -0.5 * power * u; // without its constant part, which is a turn of the phase
    ww += w * w;
    wg += w * g;
    gg += g * g;
    wk += w * k;
    gk += g * k;
    kk += k * k;
    wr += w * r;
    gr += g * r;
    kr += k * r;
    wc += w * c;
    ws += w * s;
    w1 += w;
    gc += g * c;
    gs += g * s;
    g1 += g;
    kc += k * c;
    ks += k * s;
    k1 += k;
  }
  out.squares = squares;
  const exact = squares <= ROUNDING ** 2 * (out.energy + n * constant ** 2);
  out.lag1 = exact ? 0 : products / squares;
  gradient.set([wr, gr, kr]);
  gram.set([ww, wg, wk, wg, gg, gk, wk, gk, kk]);
  cross.set([wc, ws, w1, gc, gs, g1, kc, ks, k1]);
  for (let j = 0; j < DECAY_PARAMETERS; j++) forwardSubstitute(factor, cross, LINEAR, LINEAR * j);
  for (let j = 0; j < DECAY_PARAMETERS; j++)
    for (let l = 0; l < DECAY_PARAMETERS; l++)
      for (let m = 0; m < LINEAR; m++) gram[DECAY_PARAMETERS * j + l] -= cross[LINEAR * j + m] * cross[LINEAR * l + m];
  return true;
}
