import type { Alpha } from "@/lib/numerics/stability/power-law";
import { termsIn } from "@/lib/numerics/stability/statistic-shape";

/** a of E[total variance]/Allan variance = 1 − a τ/T; phase and white frequency noise have no bias. */
const shortfall: Partial<Record<Alpha, number>> = { [-1]: 0.481, [-2]: 0.75 };

/**
 * Expected total variance over the Allan variance it stands for, pooled over stretches by number of terms.
 *
 * @param lengths Number of values of each stretch, T in units of τ₀.
 * @param alpha Exponent of the noise.
 * @param m Averaging factor, τ in units of τ₀.
 * @returns 1 when there is no bias, less otherwise; NaN when no stretch has a term.
 *
 * Source: NIST SP 1065 (2008), Table 7 (a for flicker and random walk FM).
 */
export function totalBias({ lengths, alpha, m }: { lengths: readonly number[]; alpha: Alpha; m: number }): number {
  let terms = 0;
  let expected = 0;
  for (const length of lengths) {
    const n = termsIn("totdev", length, m);
    terms += n;
    expected += n * (1 - ((shortfall[alpha] ?? 0) * m) / length);
  }
  return expected / terms;
}
