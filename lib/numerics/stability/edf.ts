import type { Statistic } from "@/lib/numerics/stability/deviation";
import { discreteEdf, longestTerm } from "@/lib/numerics/stability/discrete-edf";
import { greenhallRileyEdf } from "@/lib/numerics/stability/greenhall-riley-edf";
import type { Alpha } from "@/lib/numerics/stability/power-law";
import { statisticShapes, termsIn } from "@/lib/numerics/stability/statistic-shape";

/** edf = b T/τ − c of the total deviation (NIST SP 1065, Table 7). */
const totalEdf: Partial<Record<Alpha, readonly [b: number, c: number]>> = {
  [0]: [1.5, 0],
  [-1]: [1.17, 0.22],
  [-2]: [0.93, 0.36],
};

/**
 * Most that the mirrored ends add to the overlapping Allan deviation's edf. It keeps the published line, made for long
 * averaging times, from promising more than there are terms at short ones.
 */
const totalGain = 2.5;

/**
 * Equivalent degrees of freedom of a stability variance pooled over stretches:
 *
 *   edf = (Σ n)² / Σ (n² / edf of the stretch)
 *
 * with n the terms of each stretch. Within a stretch the exact covariance of discrete power-law noise for short
 * terms, Greenhall and Riley's combined algorithm for long ones. The total deviation has its own published edf, but at
 * most 2.5 more than the overlapping Allan deviation's, and in phase noise, where none is published, that one's.
 *
 * @param lengths Number of values of each stretch; those too short for a term are passed over.
 * @param alpha Exponent of the noise; for Allan statistics not below −2.
 * @param m Averaging factor, a whole number ≥ 1.
 * @returns NaN when no stretch has a term.
 * @throws RangeError for a noise the statistic does not converge for.
 *
 * Source: C. A. Greenhall and W. J. Riley, 35th PTTI meeting (2003); NIST SP 1065 (2008). The pooling rule is
 * Welch and Satterthwaite's for stretches with one variance.
 */
export function edf(
  statistic: Statistic,
  { lengths, alpha, m }: { lengths: readonly number[]; alpha: Alpha; m: number },
): number {
  const ofStretch = edfOfStretch(statistic, { alpha, m });
  const known = new Map<number, number>(); // many stretches have one length
  let terms = 0;
  let sum = 0;
  for (const values of lengths) {
    const n = termsIn(statistic, values, m);
    if (n === 0) continue;
    const one = known.get(values) ?? ofStretch(values);
    known.set(values, one);
    terms += n;
    sum += n ** 2 / one;
  }
  return terms ** 2 / sum;
}

function edfOfStretch(statistic: Statistic, { alpha, m }: { alpha: Alpha; m: number }): (values: number) => number {
  const shape = statisticShapes[statistic];
  const method = (shape.differences + 1) * m <= longestTerm ? discreteEdf : greenhallRileyEdf;
  const ofShape = method(shape, { alpha, m });
  const total = statistic === "totdev" ? totalEdf[alpha] : undefined;
  if (!total) return ofShape;
  return (values) =>
    Math.min((total[0] * values) / m - total[1], ofShape(values) + totalGain, termsIn(statistic, values, m));
}
