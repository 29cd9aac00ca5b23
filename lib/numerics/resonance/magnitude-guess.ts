import type { MagnitudeParameters, MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-model";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";
import type { Readout } from "@/lib/numerics/resonance/types";

const COLUMNS = 5;
const EVEN_CENTRES = 48;
const PEAKS = 8;

const gram = new Float64Array(COLUMNS ** 2);
const right = new Float64Array(COLUMNS);
const column = new Float64Array(COLUMNS);

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
  const attempt = (f0: number, halfWidth: number): void => {
    const q = f0 / (2 * halfWidth);
    const cost = linearCost(sweep, readout, f0, q);
    evaluations++;
    if (cost < bestCost) {
      bestCost = cost;
      best = { f0, q, alpha: right[0], beta: right[1], gamma: right[2], delta: right[3] };
    }
  };
  const peaks = extremes(sweep);
  for (let halfWidth = span; halfWidth > span / (2 * n); halfWidth /= 1.6) {
    const centres = Math.ceil((2 * span) / halfWidth);
    if (centres <= EVEN_CENTRES) for (let k = 0; k <= centres; k++) attempt(low + (k / centres) * span, halfWidth);
    else for (const f0 of peaks) for (let k = -2; k <= 2; k++) attempt(f0 + (k * halfWidth) / 2, halfWidth);
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
  const projected = right.slice();
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
