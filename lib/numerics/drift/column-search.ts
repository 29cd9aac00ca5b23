import { dot, orthonormal, takeOff } from "@/lib/numerics/drift/orthonormal";
import type { Whitener } from "@/lib/numerics/drift/whiteners";

/**
 * Likelihood of a model by the columns added to it, for a search over a column's shape: what stays the same is whitened and
 * fitted once.
 *
 * @param noise From `whiteners`.
 * @param values Differences of the series, `columns` of what every model holds.
 * @returns For added columns (as differences): −2 ln of the profile likelihood averaged over kinds of noise, as in `glsFit`;
 *   infinite where an added column is explained by the others.
 */
export function columnSearch({
  noise,
  values,
  columns,
}: {
  noise: readonly Whitener[];
  values: Float64Array;
  columns: readonly Float64Array[];
}): (added: readonly Float64Array[]) => number {
  const n = values.length;
  const prepared = noise.map(({ whiten, logDeterminant, prior }) => {
    const basis = orthonormal(columns.map(whiten));
    const rest = whiten(values);
    for (const direction of basis) takeOff(direction, rest);
    return { whiten, logDeterminant, logPrior: Math.log(prior), basis, rest, squares: dot(rest, rest) };
  });

  return (added) => {
    let most = -Infinity;
    const logs = prepared.map(({ whiten, logDeterminant, logPrior, basis, rest, squares }) => {
      const extended = orthonormal([...basis, ...added.map(whiten)]).slice(basis.length);
      if (extended.length < added.length) return -Infinity;
      const left = extended.reduce((sum, direction) => sum - dot(direction, rest) ** 2, squares);
      const log = logPrior - (n * Math.log(Math.max(left, Number.MIN_VALUE) / n) + logDeterminant) / 2;
      most = Math.max(most, log);
      return log;
    });
    if (most === -Infinity) return Infinity;
    return -2 * (most + Math.log(logs.reduce((sum, log) => sum + Math.exp(log - most), 0) / logs.length));
  };
}
