/**
 * Effective degrees of freedom of a combined uncertainty, Welch and Satterthwaite: ν = u_c⁴ / Σ u_i⁴/ν_i.
 *
 * @param contributions Standard uncertainties in the unit of the result (sensitivity included), with degrees of freedom
 *   above 0, infinite where the uncertainty is taken as known.
 * @returns The combined standard uncertainty and ν, infinite when every ν_i is; NaN without contributions.
 * @throws RangeError if a degree of freedom is not above 0 or an uncertainty is negative.
 *
 * Source: JCGM 100:2008 (GUM), eq. (G.2b).
 */
export function effectiveDof(contributions: readonly { u: number; dof: number }[]): { u: number; dof: number } {
  let squares = 0;
  let fourths = 0;
  for (const { u, dof } of contributions) {
    if (!(dof > 0)) throw new RangeError(`degrees of freedom must be above 0, got ${dof}`);
    if (!(u >= 0)) throw new RangeError(`a standard uncertainty cannot be negative, got ${u}`);
    squares += u ** 2;
    fourths += u ** 4 / dof;
  }
  return { u: Math.sqrt(squares), dof: squares ** 2 / fourths };
}
