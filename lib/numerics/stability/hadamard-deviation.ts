import { checkAveragingFactor } from "@/lib/numerics/stability/check-averaging-factor";
import { deviationEstimate, type DeviationEstimate } from "@/lib/numerics/stability/deviation-estimate";

/**
 * Hadamard deviation from adjacent, not overlapping averages. A steady drift adds nothing to it.
 *
 *   Hσ²(mτ₀) = Σ (ȳ[k+2] − 2ȳ[k+1] + ȳ[k])² / 6n
 *
 * ȳ[k] is the mean of the k-th group of m values of a stretch; values left over at its end are not used.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1. The averaging time is mτ₀.
 * @returns The deviation, in the unit of the values, and the number n of terms; undefined when no stretch holds 3m
 *   values.
 * @throws RangeError if m is not a whole number ≥ 1, or a value used is not finite.
 *
 * Linear in the number of values; allocates nothing per value.
 * Source: W. J. Riley, Handbook of Frequency Stability Analysis, NIST SP 1065 (2008), Hadamard variance.
 */
export function hadamardDeviation(stretches: readonly Float64Array[], m: number): DeviationEstimate | undefined {
  checkAveragingFactor(m);

  let sumOfSquares = 0;
  let n = 0;
  for (const y of stretches) {
    const groups = Math.floor(y.length / m);
    for (let k = 0; k + 2 < groups; k++) {
      let difference = 0; // m · (ȳ[k+2] − 2ȳ[k+1] + ȳ[k])
      for (let i = k * m; i < (k + 1) * m; i++) difference += y[i + 2 * m] - y[i + m] - (y[i + m] - y[i]);
      sumOfSquares += difference ** 2;
      n++;
    }
  }
  return deviationEstimate(sumOfSquares, n, 6 * m * m);
}
