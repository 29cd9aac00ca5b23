import type { MagnitudeParameters, MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-model";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";
import type { Readout } from "@/lib/numerics/resonance/types";

const COLUMNS = 5;
/** Half-widths down to span/16 are tried all over the sweep, on data averaged to about this many points. */
const WIDE_LEVELS = 5;
const WIDE_POINTS = 80;
/** Narrower ones where the data stand out most. */
const PEAKS = 5;

const gram = new Float64Array(COLUMNS ** 2);
const right = new Float64Array(COLUMNS);
const column = new Float64Array(COLUMNS);
const projected = new Float64Array(COLUMNS);

/**
 * First guesses for a magnitude sweep.
 *
 * |aE + b|² = a²|E|² + 2a·Re(b̄E) + |b|² is linear in {Re L, Im L, 1, s, s²} at fixed (f0, Q), for |L|² = Re L. The best
 * of a coarse grid of (f0, Q) gives their coefficients α, β, γ; then a² solves P² − (2α + 4γ)P + α² + β² = 0. The
 * modulus cannot tell its two roots apart, so both are given.
 */
export function magnitudeGuesses(sweep: MagnitudeSweep, readout: Readout): { guesses: MagnitudeParameters[]; evaluations: number } {
  const { n, f } = sweep;
  const low = f[0];
  const span = f[n - 1] - low;
  let evaluations = 0;
  let bestCost = Infinity;
  let best = { f0: low + span / 2, q: (low + span / 2) / span, alpha: 0, beta: 0, gamma: 0, delta: 0 };
  const attempt = (data: MagnitudeSweep, f0: number, q: number): void => {
    const cost = linearCost(data, readout, f0, q);
    evaluations++;
    if (cost < bestCost) {
      bestCost = cost;
      best = { f0, q, alpha: right[0], beta: right[1], gamma: right[2], delta: right[3] };
    }
  };
  const coarse = averaged(sweep);
  let halfWidth = span;
  for (let level = 0; level < WIDE_LEVELS; level++, halfWidth /= 2) {
    const centres = Math.ceil((2 * span) / halfWidth);
    for (let k = 0; k <= centres; k++) {
      const f0 = low + (k / centres) * span;
      attempt(coarse, f0, f0 / (2 * halfWidth));
    }
  }
  bestCost = Infinity;
  attempt(sweep, best.f0, best.q);
  const peaks = extremes(sweep);
  for (; halfWidth > span / n; halfWidth /= 2) {
    for (const f0 of peaks) for (let k = -1; k <= 1; k++) attempt(sweep, f0 + (k * halfWidth) / 2, f0 / (2 * halfWidth));
  }

  const { f0, q, alpha, beta, gamma, delta } = best;
  const offset = Math.max(0, gamma);
  const half = alpha + 2 * offset;
  const root = Math.sqrt(Math.max(0, half * half - alpha * alpha - beta * beta));
  const guesses = [half - root, half + root].map((power) => {
    const a = Math.sqrt(Math.max(power, 1e-6 * (Math.abs(alpha) + Math.abs(beta)) + Number.MIN_VALUE));
    const inPhase = (alpha - a * a) / (2 * a);
    const across = beta / (2 * a);
    const [bRe, bIm] = readout === "velocity" ? [inPhase, across] : [across, -inPhase];
    // |b + cs|² rises by 2b̄c·s: a slope along b explains it.
    const along = offset > 0 ? Math.max(-1, Math.min(1, delta / (2 * offset))) : 0;
    return { f0, q, a, bRe, bIm, cRe: along * bRe, cIm: along * bIm };
  });
  return { guesses, evaluations };
}

/** The sweep in blocks of neighbouring points, about WIDE_POINTS of them: root mean square at the mean frequency. */
function averaged({ n, f, s, y }: MagnitudeSweep): MagnitudeSweep {
  const length = Math.max(1, Math.floor(n / WIDE_POINTS));
  const blocks = Math.floor(n / length);
  const mean = (column: Float64Array, square: boolean): Float64Array =>
    Float64Array.from({ length: blocks }, (_, k) => {
      let sum = 0;
      for (let i = k * length; i < (k + 1) * length; i++) sum += square ? column[i] * column[i] : column[i];
      return square ? Math.sqrt(sum / length) : sum / length;
    });
  return { n: blocks, f: mean(f, false), s: mean(s, false), y: mean(y, true) };
}

/** Σ of squared residuals of y² on the five columns; their coefficients are left in `right`. */
function linearCost({ n, f, s, y }: MagnitudeSweep, readout: Readout, f0: number, q: number): number {
  gram.fill(0);
  right.fill(0);
  let total = 0;
  for (let i = 0; i < n; i++) {
    const x = (q * (f[i] - f0) * (f[i] + f0)) / (f[i] * f0);
    const power = (readout === "displacement" ? f0 / f[i] : 1) / (1 + x * x);
    column[0] = power;
    column[1] = -x * power;
    column[2] = 1;
    column[3] = s[i];
    column[4] = s[i] * s[i];
    const y2 = y[i] * y[i];
    total += y2 * y2;
    for (let j = 0; j < COLUMNS; j++) {
      right[j] += column[j] * y2;
      for (let k = 0; k <= j; k++) gram[COLUMNS * j + k] += column[j] * column[k];
    }
  }
  projected.set(right);
  if (!solveCholesky(gram, right, COLUMNS)) return Infinity;
  for (let j = 0; j < COLUMNS; j++) total -= projected[j] * right[j];
  return total;
}

/** Frequencies where the data stand out most from their median, up or down. */
function extremes({ n, f, y }: MagnitudeSweep): number[] {
  const median = y.slice(0, n).sort()[n >> 1];
  const height = (i: number): number => (i < 0 || i >= n ? 0 : Math.abs(y[i] - median));
  const found: number[] = [];
  for (let i = 0; i < n; i++) if (height(i) >= height(i - 1) && height(i) > height(i + 1)) found.push(i);
  return found.sort((i, j) => height(j) - height(i)).slice(0, PEAKS).map((i) => f[i]);
}
