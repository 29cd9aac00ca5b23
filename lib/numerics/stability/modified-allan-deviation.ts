import { checkAveragingFactor } from "@/lib/numerics/stability/check-averaging-factor";
import { deviationEstimate, type DeviationEstimate } from "@/lib/numerics/stability/deviation-estimate";

/**
 * Modified Allan deviation of a series recorded in unbroken stretches. Unlike the Allan deviation it tells white
 * from flicker phase noise.
 *
 *   Mod σ²(mτ₀) = Σ_k ( Σ_{j=k}^{k+m−1} (ȳ[j+m] − ȳ[j]) )² / (2 m² n)
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1. The averaging time is mτ₀.
 * @returns The deviation, in the unit of the values, and the number n of (overlapping) terms; undefined when no
 *   stretch holds 3m − 1 values.
 * @throws RangeError if m is not a whole number ≥ 1, or a value used is not finite.
 *
 * Linear in the number of values: the inner sum is carried along, and so are the differences that enter and leave
 * it. Both pass through the same operations, so a difference leaves as exactly the number that entered.
 * Source: W. J. Riley, Handbook of Frequency Stability Analysis, NIST SP 1065 (2008), modified Allan variance.
 */
export function modifiedAllanDeviation(stretches: readonly Float64Array[], m: number): DeviationEstimate | undefined {
  checkAveragingFactor(m);

  let sumOfSquares = 0;
  let n = 0;
  for (const y of stretches) {
    const terms = y.length - 3 * m + 2;
    if (terms < 1) continue;

    let entering = 0; // m · (ȳ[j+m] − ȳ[j]) at the leading end of the inner sum
    for (let i = 0; i < m; i++) entering += y[i + m] - y[i];
    let leaving = entering;
    let inner = entering;
    for (let j = 1; j < m; j++) {
      entering += secondDifference(y, j - 1, m);
      inner += entering;
    }
    sumOfSquares += inner ** 2;

    for (let k = 1; k < terms; k++) {
      entering += secondDifference(y, k + m - 2, m);
      inner += entering - leaving;
      leaving += secondDifference(y, k - 1, m);
      sumOfSquares += inner ** 2;
    }
    n += terms;
  }
  return deviationEstimate(sumOfSquares, n, 2 * m ** 4);
}

function secondDifference(y: Float64Array, at: number, m: number): number {
  return y[at + 2 * m] - y[at + m] - (y[at + m] - y[at]);
}
