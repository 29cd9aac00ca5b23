import { normalCdf } from "@/lib/numerics/statistics/distributions";

/** Longest series whose exact probability is worth counting; the normal approximation is good long before. */
const longestExact = 60;

/**
 * Mann–Kendall test for a trend of any shape.
 *
 *   S = Σ_{i<j} sign(y[j] − y[i]), z = (S − sign S)/√var S,
 *   var S = [ n(n−1)(2n+5) − Σ t(t−1)(2t+5) ]/18 over groups of t equal values
 *
 * @param values In order of time, all finite; the spacing does not matter.
 * @returns S, its variance, z, the two-sided p by the normal approximation, `exactP` counted over all orders (only
 *   without equal values, up to 60 of them) and τ = S/(n(n−1)/2). Undefined below three values.
 * @throws RangeError if a value is not finite.
 *
 * The answer assumes values without memory: flicker or random walk pass for a trend. Quadratic in the number of values.
 * Source: R. O. Gilbert, Statistical Methods for Environmental Pollution Monitoring (1987), chapter 16; M. G. Kendall,
 * Rank Correlation Methods.
 */
export function mannKendall(values: Float64Array):
  | { s: number; variance: number; z: number; p: number; exactP: number | undefined; tau: number; n: number }
  | undefined {
  const n = values.length;
  if (n < 3) return undefined;
  if (!values.every(Number.isFinite)) throw new RangeError("a value is not finite");

  let s = 0;
  for (let i = 0; i < n; i++) {
    for (let j = i + 1; j < n; j++) s += Math.sign(values[j] - values[i]);
  }
  const variance = kendallVariance(values);
  const z = s === 0 ? 0 : (s - Math.sign(s)) / Math.sqrt(variance);
  const untied = variance === (n * (n - 1) * (2 * n + 5)) / 18;
  return {
    s,
    variance,
    z,
    p: 2 * normalCdf(-Math.abs(z)),
    exactP: untied && n <= longestExact ? exactProbability(Math.abs(s), n) : undefined,
    tau: s / ((n * (n - 1)) / 2),
    n,
  };
}

/** Variance of Kendall's S for values in random order, corrected for groups of equal values. */
export function kendallVariance(values: Float64Array): number {
  const sorted = values.slice().sort();
  let sum = term(sorted.length);
  let start = 0;
  for (let i = 1; i <= sorted.length; i++) {
    if (i < sorted.length && sorted[i] === sorted[start]) continue;
    sum -= term(i - start);
    start = i;
  }
  return sum / 18;
}

function term(t: number): number {
  return t * (t - 1) * (2 * t + 5);
}

/** Two-sided probability of |S| ≥ s from the number of orders of n values with each number of inversions. */
function exactProbability(s: number, n: number): number {
  const pairs = (n * (n - 1)) / 2;
  let share = Float64Array.of(1); // of the orders of k values, by number of inversions
  for (let k = 2; k <= n; k++) {
    const next = new Float64Array(share.length + k - 1);
    for (let i = 0; i < share.length; i++) {
      for (let added = 0; added < k; added++) next[i + added] += share[i] / k;
    }
    share = next;
  }
  let tail = 0;
  for (let inversions = 0; pairs - 2 * inversions >= s; inversions++) tail += share[inversions];
  return Math.min(1, 2 * tail);
}
