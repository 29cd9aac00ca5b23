import type { Complex, Readout } from "@/lib/numerics/resonance/types";
import { regression } from "@/lib/numerics/statistics/regression";

type Fit = { f0Hz: number; q: number; a: Complex; noise: number };

/**
 * Covariance of all parameters of a fitted complex sweep, from the full Jacobian and the noise of the residuals.
 *
 *   V = a e + b + c s, e = L m, L = 1/(1 + ix), x = Q(f/f0 − f0/f), m = 1 (velocity) or f0/(if) (displacement)
 *   ∂e/∂x = −i L² m, ∂x/∂f0 = −Q (f/f0² + 1/f), ∂x/∂Q = f/f0 − f0/f
 *
 * @param frequencyHz Frequencies of the sweep in Hz, positive.
 * @param fit f0 in Hz, Q, a and the noise in each quadrature, in one unit of voltage.
 * @param offsetSlope Whether c was fitted; without it c has no place in the matrix.
 * @returns Of `RESONANCE_PARAMETERS` in their order, rows one after another, in products of their units; six of them without c.
 *   Undefined where the parameters cannot be told apart.
 *
 * Source: as `evaluateResonance`; JCGM 102:2011, linear propagation through least squares.
 */
export function parameterCovariance(frequencyHz: Float64Array, { f0Hz, q, a, noise }: Fit, { readout, offsetSlope = true }: { readout: Readout; offsetSlope?: boolean }): Float64Array | undefined {
  const n = frequencyHz.length;
  const size = offsetSlope ? 8 : 6;
  const columns = Array.from({ length: size }, () => new Float64Array(2 * n));
  const low = frequencyHz.reduce((least, f) => Math.min(least, f), Infinity);
  const high = frequencyHz.reduce((most, f) => Math.max(most, f), -Infinity);
  const put = (column: number, i: number, re: number, im: number) => {
    columns[column][i] = re;
    columns[column][n + i] = im;
  };
  for (let i = 0; i < n; i++) {
    const f = frequencyHz[i];
    const x = q * (f / f0Hz - f0Hz / f);
    const power = 1 / (1 + x * x);
    const l = { re: power, im: -x * power };
    const m = readout === "velocity" ? { re: 1, im: 0 } : { re: 0, im: -f0Hz / f };
    const e = times(l, m);
    // −i a L² m: how V moves with x.
    const byX = times(times({ re: a.im, im: -a.re }, times(l, l)), m);
    const byF0 = -q * (f / f0Hz ** 2 + 1 / f);
    const own = readout === "velocity" ? { re: 0, im: 0 } : times(a, { re: e.re / f0Hz, im: e.im / f0Hz });
    put(0, i, byX.re * byF0 + own.re, byX.im * byF0 + own.im);
    put(1, i, byX.re * (f / f0Hz - f0Hz / f), byX.im * (f / f0Hz - f0Hz / f));
    put(2, i, e.re, e.im);
    put(3, i, -e.im, e.re);
    put(4, i, 1, 0);
    put(5, i, 0, 1);
    if (!offsetSlope) continue;
    const s = (f - (low + high) / 2) / (high - low);
    put(6, i, s, 0);
    put(7, i, 0, s);
  }
  // Any values do: the inverse of JᵀJ is had by taking their own scatter out of the covariance again.
  const y = Float64Array.from({ length: 2 * n }, (_, i) => (i % 2 === 0 ? 1 : -1));
  try {
    const { covariance, residualSd } = regression({ columns, y });
    return covariance.map((value) => value * (noise / residualSd) ** 2);
  } catch (error) {
    if (error instanceof RangeError) return undefined;
    throw error;
  }
}

const times = (one: Complex, other: Complex): Complex => ({ re: one.re * other.re - one.im * other.im, im: one.re * other.im + one.im * other.re });
