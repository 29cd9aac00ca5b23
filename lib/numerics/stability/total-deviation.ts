import { checkAveragingFactor } from "@/lib/numerics/stability/check-averaging-factor";
import { deviationEstimate, type DeviationEstimate } from "@/lib/numerics/stability/deviation-estimate";

/**
 * Total deviation of a series recorded in unbroken stretches: the Allan deviation with each stretch continued at
 * both ends by its mirror image, so that every inner place gives a term even at long averaging times.
 *
 *   σ²(mτ₀) = Σ_{i=1}^{N−1} ( m values from i on − m values before i )² / (2 m² n),  n = N − 1 per stretch of N
 *
 * Mirroring the values is the inverted reflection of the phase record about its end points in NIST SP 1065. The
 * result is as printed there, without bias correction; `stabilityCurve` corrects for the noise found.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1. The averaging time is mτ₀.
 * @returns The deviation, in the unit of the values, and n; undefined when no stretch holds 2m values (the published
 *   degrees of freedom end at half the record).
 * @throws RangeError if m is not a whole number ≥ 1, or a value used is not finite.
 *
 * Linear in the number of values; allocates nothing per value.
 * Source: W. J. Riley, Handbook of Frequency Stability Analysis, NIST SP 1065 (2008), total variance.
 */
export function totalDeviation(stretches: readonly Float64Array[], m: number): DeviationEstimate | undefined {
  checkAveragingFactor(m);

  let sumOfSquares = 0;
  let n = 0;
  for (const y of stretches) {
    if (y.length < 2 * m) continue;

    let difference = 0; // sum of the m values from i on minus that of the m values before i
    for (let i = 0; i < m; i++) difference += mirrored(y, 1 + i) - mirrored(y, -i);
    sumOfSquares += difference ** 2;
    for (let i = 1; i < y.length - 1; i++) {
      difference += mirrored(y, i + m) - y[i] - (y[i] - mirrored(y, i - m));
      sumOfSquares += difference ** 2;
    }
    n += y.length - 1;
  }
  return deviationEstimate(sumOfSquares, n, 2 * m * m);
}

function mirrored(y: Float64Array, index: number): number {
  if (index < 0) return y[-1 - index];
  return index < y.length ? y[index] : y[2 * y.length - 1 - index];
}
