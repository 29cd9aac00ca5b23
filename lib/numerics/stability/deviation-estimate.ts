/** A deviation in the unit of the values (time deviation: that unit × τ₀) and the number n of terms behind it. */
export type DeviationEstimate = { deviation: number; n: number };

/**
 * Root of a mean square over n terms.
 *
 * @param divisor What one squared term carries beyond the variance, 2m² for the Allan variance.
 * @returns Undefined when there are no terms.
 * @throws RangeError if a value behind the sum was not finite.
 */
export function deviationEstimate(sumOfSquares: number, n: number, divisor: number): DeviationEstimate | undefined {
  if (n === 0) return undefined;
  if (!Number.isFinite(sumOfSquares)) throw new RangeError("stretches hold a value that is not finite");
  return { deviation: Math.sqrt(sumOfSquares / (divisor * n)), n };
}
