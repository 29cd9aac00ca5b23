import { fCdf } from "@/lib/numerics/statistics/distributions";
import { meanAndSd } from "@/lib/numerics/statistics/mean-and-sd";

type Source = { sumOfSquares: number; dof: number; meanSquare: number };

export type OneWayAnova = {
  mean: number;
  between: Source;
  within: Source;
  f: number;
  /** Probability of an F at least as large where groups do not differ. */
  p: number;
  rSquared: number;
  /** Standard deviation within a group: repeatability. */
  withinSd: number;
  /** Standard deviation of the groups' true values, 0 where the estimate is negative. */
  betweenSd: number;
  /** Of one value of a group not yet seen: reproducibility, √(within² + between²). */
  totalSd: number;
};

/**
 * One-way analysis of variance of groups of any size, with the components of variance:
 *
 *   s_w² = MS_within, s_b² = max(0, (MS_between − MS_within)/n̄), n̄ = (N − Σ n_i²/N)/(p − 1)
 *
 * @param groups Values of each group, all finite; empty groups are passed over.
 * @returns In the unit of the values. Undefined below two groups or where no group has two values.
 * @throws RangeError if a value is not finite.
 *
 * Sources: ISO 5725-2:1994, 7.4.5; JCGM 100:2008, H.5. Checked on NIST StRD, ISO 5725-2 Annex B and H.5.
 */
export function oneWayAnova(groups: readonly Float64Array[]): OneWayAnova | undefined {
  if (!groups.every((group) => group.every(Number.isFinite))) throw new RangeError("a value is not finite");
  const filled = groups.filter(({ length }) => length > 0);
  const n = filled.reduce((sum, { length }) => sum + length, 0);
  if (filled.length < 2 || n === filled.length) return undefined;

  const origin = filled[0][0];
  const shifted = filled.map((group) => meanAndSd(group.map((value) => value - origin)));
  const mean = shifted.reduce((sum, group, i) => sum + (group.mean * filled[i].length) / n, 0);
  const between = sourceOf(
    shifted.reduce((sum, group, i) => sum + filled[i].length * (group.mean - mean) ** 2, 0),
    filled.length - 1,
  );
  const within = sourceOf(shifted.reduce((sum, { squares }) => sum + squares, 0), n - filled.length);
  const perGroup = (n - filled.reduce((sum, { length }) => sum + length ** 2, 0) / n) / (filled.length - 1);
  const betweenVariance = Math.max(0, (between.meanSquare - within.meanSquare) / perGroup);
  const f = between.meanSquare / within.meanSquare;
  return {
    mean: origin + mean,
    between,
    within,
    f,
    p: Number.isFinite(f) ? 1 - fCdf(f, { numerator: between.dof, denominator: within.dof }) : 0,
    rSquared: between.sumOfSquares / (between.sumOfSquares + within.sumOfSquares),
    withinSd: Math.sqrt(within.meanSquare),
    betweenSd: Math.sqrt(betweenVariance),
    totalSd: Math.sqrt(within.meanSquare + betweenVariance),
  };
}

function sourceOf(sumOfSquares: number, dof: number): Source {
  return { sumOfSquares, dof, meanSquare: sumOfSquares / dof };
}
