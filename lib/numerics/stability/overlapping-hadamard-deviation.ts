import { checkAveragingFactor } from "@/lib/numerics/stability/check-averaging-factor";
import { deviationEstimate, type DeviationEstimate } from "@/lib/numerics/stability/deviation-estimate";

/**
 * Overlapping Hadamard deviation of a series recorded in unbroken stretches. A steady drift adds nothing to it.
 *
 *   Hσ²(mτ₀) = Σ (ȳ[j+2m] − 2ȳ[j+m] + ȳ[j])² / 6n
 *
 * ȳ[j] is the mean of the m values from j on; all three means lie inside one stretch.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1. The averaging time is mτ₀.
 * @returns The deviation, in the unit of the values, and the number n of (overlapping) terms; undefined when no
 *   stretch holds 3m values.
 * @throws RangeError if m is not a whole number ≥ 1, or a value used is not finite.
 *
 * Linear in the number of values; allocates nothing per value.
 * Source: W. J. Riley, Handbook of Frequency Stability Analysis, NIST SP 1065 (2008), overlapping Hadamard variance.
 */
export function overlappingHadamardDeviation(
  stretches: readonly Float64Array[],
  m: number,
): DeviationEstimate | undefined {
  checkAveragingFactor(m);

  let sumOfSquares = 0;
  let n = 0;
  for (const y of stretches) {
    const terms = y.length - 3 * m + 1;
    if (terms < 1) continue;

    let difference = 0; // m · (ȳ[j+2m] − 2ȳ[j+m] + ȳ[j]), carried from one j to the next
    for (let i = 0; i < m; i++) difference += y[i + 2 * m] - y[i + m] - (y[i + m] - y[i]);
    sumOfSquares += difference ** 2;
    for (let j = 0; j < terms - 1; j++) {
      const middle = y[j + 2 * m] - y[j + m];
      difference += y[j + 3 * m] - y[j + 2 * m] - middle - (middle - (y[j + m] - y[j]));
      sumOfSquares += difference ** 2;
    }
    n += terms;
  }
  return deviationEstimate(sumOfSquares, n, 6 * m * m);
}
