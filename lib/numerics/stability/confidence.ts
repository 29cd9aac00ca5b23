import { chiSquaredQuantile } from "@/lib/numerics/statistics/distributions";

/**
 * Two-sided chi-squared band of a deviation: σ·√(edf/χ²) at probabilities (1 ± confidence)/2.
 *
 * @param confidence Probability between 0 and 1 that the band holds the true deviation, 0.683 for one sigma.
 * @returns Limits in the unit of the deviation.
 * @throws RangeError if the confidence is not between 0 and 1 or edf is not above 0.
 *
 * Source: NIST SP 1065 (2008) eq. (45).
 */
export function confidenceBand({ deviation, edf, confidence }: { deviation: number; edf: number; confidence: number }): {
  lower: number;
  upper: number;
} {
  if (!(confidence > 0 && confidence < 1)) throw new RangeError(`confidence lies between 0 and 1, got ${confidence}`);
  return {
    lower: deviation * Math.sqrt(edf / chiSquaredQuantile((1 + confidence) / 2, edf)),
    upper: deviation * Math.sqrt(edf / chiSquaredQuantile((1 - confidence) / 2, edf)),
  };
}
