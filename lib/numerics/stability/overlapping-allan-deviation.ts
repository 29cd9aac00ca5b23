import { checkAveragingFactor } from "@/lib/numerics/stability/check-averaging-factor";
import { deviationEstimate, type DeviationEstimate } from "@/lib/numerics/stability/deviation-estimate";

/**
 * Overlapping Allan deviation of a series recorded in unbroken stretches.
 *
 *   σ²(mτ₀) = Σ (ȳ[j+m] − ȳ[j])² / 2n
 *
 * ȳ[j] is the mean of the m values from j on. The sum runs over the n places where both means lie inside one
 * stretch, so no term reaches across a gap.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite. Give them relative to a reference (fractional
 *   f0, say): a large common offset costs digits.
 * @param m Averaging factor, a whole number ≥ 1. The averaging time is mτ₀.
 * @returns The deviation, in the unit of the values, and n. The n terms overlap: a count, not degrees of freedom.
 *   Undefined when no stretch holds 2m values.
 * @throws RangeError if m is not a whole number ≥ 1, or a value used is not finite.
 *
 * Linear in the number of values; allocates nothing per value.
 * Source: W. J. Riley, Handbook of Frequency Stability Analysis, NIST SP 1065 (2008), overlapping Allan variance.
 * Leaving out the terms across gaps is our choice.
 */
export function overlappingAllanDeviation(
  stretches: readonly Float64Array[],
  m: number,
): DeviationEstimate | undefined {
  checkAveragingFactor(m);

  let sumOfSquares = 0;
  let n = 0;
  for (const y of stretches) {
    const terms = y.length - 2 * m + 1;
    if (terms < 1) continue;

    let difference = 0; // m · (ȳ[j+m] − ȳ[j]), carried from one j to the next
    for (let i = 0; i < m; i++) difference += y[i + m] - y[i];
    sumOfSquares += difference ** 2;
    for (let j = 1; j < terms; j++) {
      difference += y[j + 2 * m - 1] - y[j + m - 1] - (y[j + m - 1] - y[j - 1]);
      sumOfSquares += difference ** 2;
    }
    n += terms;
  }
  return deviationEstimate(sumOfSquares, n, 2 * m * m);
}
