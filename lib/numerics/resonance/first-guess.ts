import type { PreparedSweep } from "@/lib/numerics/resonance/prepare";
import { emptyProjectedModel, projectedCost } from "@/lib/numerics/resonance/projected-model";
import type { Readout } from "@/lib/numerics/resonance/types";

export type Guess = { f0: number; q: number };

/** Passes of the circle fit; each one weights by the pole the last one found. */
const CIRCLE_PASSES = 2;

/**
 * First guess by an algebraic circle fit with the phase law built in, blind to offset and slope.
 *
 * Near resonance z(t) = r/(t − p) + b + ct with t = (f − fm)/(half the span): a circle run through at the pace the
 * phase prescribes. Multiplied out, z·t = p·z + A + Bt + Ct² is linear in the complex pole p, whose real part is
 * the centre and whose imaginary part is the half-width. Weighting by 1/|t − p|² with the last pole gives the
 * residual its even variance back.
 *
 * @returns undefined when the pole is not finite or not a resonance.
 *
 * Source: Levy, IRE Trans. Autom. Control 4 (1959) 37; weights of Sanathanan & Koerner, IEEE Trans. Autom. Control 8
 * (1963) 56.
 */
export function circleGuess(p: PreparedSweep): Guess | undefined {
  const middle = (p.low + p.high) / 2;
  const half = (p.high - p.low) / 2;
  let poleRe = 0;
  let poleIm = Infinity; // even weights at first
  for (let pass = 0; pass < CIRCLE_PASSES; pass++) {
    const pole = poleOf(p, middle, 1 / half, poleRe, poleIm);
    if (!Number.isFinite(pole.re) || !Number.isFinite(pole.im) || pole.im === 0) return undefined;
    poleRe = Math.max(-1, Math.min(1, pole.re));
    poleIm = Math.max(0.5 / p.n, Math.min(4, Math.abs(pole.im)));
  }
  const f0 = middle + poleRe * half;
  return { f0, q: f0 / (2 * poleIm * half) };
}

const pole = { re: 0, im: 0 };

/** One weighted linear fit of the pole. */
function poleOf(p: PreparedSweep, middle: number, perHalf: number, weightRe: number, weightIm: number): { re: number; im: number } {
  const { n, f, re, im } = p;
  const even = weightIm === Infinity;
  let m0 = 0, m1 = 0, m2 = 0, m3 = 0, m4 = 0, zz = 0, zzt = 0;
  let a0 = 0, a1 = 0, a2 = 0, a3 = 0, b0 = 0, b1 = 0, b2 = 0, b3 = 0;
  for (let i = 0; i < n; i++) {
    const t = (f[i] - middle) * perHalf;
    const d = t - weightRe;
    const w = even ? 1 : 1 / (d * d + weightIm * weightIm);
    const wt = w * t;
    const wt2 = wt * t;
    m0 += w;
    m1 += wt;
    m2 += wt2;
    m3 += wt2 * t;
    m4 += wt2 * t * t;
    const x = re[i];
    const y = im[i];
    const e = x * x + y * y;
    zz += w * e;
    zzt += wt * e;
    a0 += w * x;
    b0 += w * y;
    a1 += wt * x;
    b1 += wt * y;
    a2 += wt2 * x;
    b2 += wt2 * y;
    a3 += wt2 * t * x;
    b3 += wt2 * t * y;
  }
  // Cholesky of the polynomials' Gram matrix, then the columns z and zt in that basis.
  const l00 = Math.sqrt(m0);
  const l10 = m1 / l00;
  const l20 = m2 / l00;
  const l11 = Math.sqrt(m2 - l10 * l10);
  const l21 = (m3 - l20 * l10) / l11;
  const l22 = Math.sqrt(m4 - l20 * l20 - l21 * l21);
  const zr0 = a0 / l00;
  const zi0 = b0 / l00;
  const zr1 = (a1 - l10 * zr0) / l11;
  const zi1 = (b1 - l10 * zi0) / l11;
  const zr2 = (a2 - l20 * zr0 - l21 * zr1) / l22;
  const zi2 = (b2 - l20 * zi0 - l21 * zi1) / l22;
  const tr0 = a1 / l00;
  const ti0 = b1 / l00;
  const tr1 = (a2 - l10 * tr0) / l11;
  const ti1 = (b2 - l10 * ti0) / l11;
  const tr2 = (a3 - l20 * tr0 - l21 * tr1) / l22;
  const ti2 = (b3 - l20 * ti0 - l21 * ti1) / l22;
  const norm = zz - (zr0 * zr0 + zi0 * zi0 + zr1 * zr1 + zi1 * zi1 + zr2 * zr2 + zi2 * zi2);
  pole.re = (zzt - (zr0 * tr0 + zi0 * ti0 + zr1 * tr1 + zi1 * ti1 + zr2 * tr2 + zi2 * ti2)) / norm;
  pole.im = -(zr0 * ti0 - zi0 * tr0 + zr1 * ti1 - zi1 * tr1 + zr2 * ti2 - zi2 * tr2) / norm;
  return pole;
}

/** Half-widths tried, as fractions of the span: from twice the span down to half a point spacing, by factors of two. */
const WIDEST = 1;
/** Up to this many centres a level is covered evenly, half a half-width apart; narrower ones only where the data stand out. */
const EVEN_CENTRES = 48;
const PEAKS = 12;

/**
 * First guess from a coarse grid of centres and half-widths, the best by projected cost.
 *
 * Resonances narrow against the span are sought only around the points standing out most from offset and slope, so
 * the cost grows like n log n.
 */
export function gridGuess(p: PreparedSweep, readout: Readout): { guess: Guess; evaluations: number } {
  const span = p.high - p.low;
  const trial = emptyProjectedModel();
  let best: Guess = { f0: (p.low + p.high) / 2, q: (p.low + p.high) / span };
  let bestCost = Infinity;
  let evaluations = 0;
  const attempt = (f0: number, halfWidth: number): void => {
    const q = f0 / (2 * halfWidth);
    const cost = projectedCost(p, readout, f0, q, trial);
    evaluations++;
    if (cost < bestCost) {
      bestCost = cost;
      best = { f0, q };
    }
  };
  const peaks = standingOut(p);
  for (let halfWidth = WIDEST * span; halfWidth > span / (2 * p.n); halfWidth /= 2) {
    const centres = Math.ceil((2 * span) / halfWidth);
    if (centres <= EVEN_CENTRES) {
      for (let k = 0; k <= centres; k++) attempt(p.low + (k / centres) * span, halfWidth);
    } else {
      for (const f0 of peaks) for (let k = -1; k <= 1; k++) attempt(f0 + (k * halfWidth) / 2, halfWidth);
    }
  }
  return { guess: best, evaluations };
}

/** Frequencies of the largest local maxima of the projected data. */
function standingOut({ n, f, re, im }: PreparedSweep): number[] {
  const height = (i: number): number => (i < 0 || i >= n ? 0 : re[i] * re[i] + im[i] * im[i]);
  const maxima: number[] = [];
  for (let i = 0; i < n; i++) if (height(i) >= height(i - 1) && height(i) > height(i + 1)) maxima.push(i);
  return maxima.sort((i, j) => height(j) - height(i)).slice(0, PEAKS).map((i) => f[i]);
}
