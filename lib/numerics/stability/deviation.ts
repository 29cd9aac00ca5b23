import { allanDeviation } from "@/lib/numerics/stability/allan-deviation";
import type { DeviationEstimate } from "@/lib/numerics/stability/deviation-estimate";
import { hadamardDeviation } from "@/lib/numerics/stability/hadamard-deviation";
import { modifiedAllanDeviation } from "@/lib/numerics/stability/modified-allan-deviation";
import { overlappingAllanDeviation } from "@/lib/numerics/stability/overlapping-allan-deviation";
import { overlappingHadamardDeviation } from "@/lib/numerics/stability/overlapping-hadamard-deviation";
import { timeDeviation } from "@/lib/numerics/stability/time-deviation";
import { totalDeviation } from "@/lib/numerics/stability/total-deviation";

export type Statistic = "adev" | "oadev" | "mdev" | "tdev" | "hdev" | "ohdev" | "totdev";

const deviations: Record<
  Statistic,
  (stretches: readonly Float64Array[], m: number) => DeviationEstimate | undefined
> = {
  adev: allanDeviation,
  oadev: overlappingAllanDeviation,
  mdev: modifiedAllanDeviation,
  tdev: timeDeviation,
  hdev: hadamardDeviation,
  ohdev: overlappingHadamardDeviation,
  totdev: totalDeviation,
};

/**
 * One stability statistic at averaging factor m, pooled over the unbroken stretches of a series: terms are formed
 * inside each stretch and the variances weighted by their number.
 *
 * @param statistic `tdev` comes out in the unit of the values times τ₀, all others in the unit of the values.
 * @param stretches Values one τ₀ apart, oldest first, all finite.
 * @param m Averaging factor, a whole number ≥ 1. The averaging time is mτ₀.
 * @returns Undefined when no stretch is long enough for one term.
 * @throws RangeError if m is not a whole number ≥ 1, or a value used is not finite.
 */
export function deviation(
  statistic: Statistic,
  stretches: readonly Float64Array[],
  m: number,
): DeviationEstimate | undefined {
  return deviations[statistic](stretches, m);
}
