import type { DeviationEstimate } from "@/lib/numerics/stability/deviation-estimate";
import { modifiedAllanDeviation } from "@/lib/numerics/stability/modified-allan-deviation";

/**
 * Time deviation: τ · Mod σ(τ) / √3, here with τ counted in τ₀, so multiply by τ₀ in seconds for seconds.
 *
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1.
 * @returns The deviation, in the unit of the values times τ₀, and the number of terms; undefined when no stretch
 *   holds 3m − 1 values.
 * @throws RangeError if m is not a whole number ≥ 1, or a value used is not finite.
 *
 * Source: W. J. Riley, Handbook of Frequency Stability Analysis, NIST SP 1065 (2008), time variance.
 */
export function timeDeviation(stretches: readonly Float64Array[], m: number): DeviationEstimate | undefined {
  const modified = modifiedAllanDeviation(stretches, m);
  return modified && { deviation: (m * modified.deviation) / Math.sqrt(3), n: modified.n };
}
