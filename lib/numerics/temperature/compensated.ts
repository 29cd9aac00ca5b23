/**
 * Values corrected for an influence, with what the correction adds to their uncertainty, in two parts: one that is
 * independent from value to value, and one common to all, so that a mean does not shrink it. An error δ of the common
 * quantities moves value i by Σ_j sensitivities[j][i] δ_j; δ has covariance `covariance`. The values' own uncertainty is
 * in neither.
 */
export type Compensated = {
  values: Float64Array;
  independentU: Float64Array;
  sources: readonly string[];
  /** One per source, as long as the values. */
  sensitivities: readonly Float64Array[];
  /** Of the sources, rows one after another. */
  covariance: Float64Array;
};

/**
 * Standard uncertainty of a weighted sum of compensated values, JCGM 100:2008 eq. (13):
 *
 *   u² = Σ w_i² (own_i² + independent_i²) + sᵀ C s, s_j = Σ w_i S_ji
 *
 * @param weights One per value: 1/n each for a mean, +1 and −1 for a difference, a line's weights for its slope.
 * @param own The values' own standard uncertainties, taken as independent; 0 where not given.
 * @returns `u` in the unit of the weighted values, and its two parts.
 * @throws RangeError if lengths differ.
 */
export function weightedSumU(
  { values, independentU, sensitivities, covariance }: Compensated,
  weights: Float64Array,
  own?: Float64Array,
): { u: number; independent: number; common: number } {
  if (weights.length !== values.length || (own && own.length !== values.length)) {
    throw new RangeError("weights, uncertainties and values must be equally many");
  }
  let independent = 0;
  weights.forEach((weight, i) => (independent += weight ** 2 * (independentU[i] ** 2 + (own?.[i] ?? 0) ** 2)));
  const shares = sensitivities.map((sensitivity) => sensitivity.reduce((sum, one, i) => sum + one * weights[i], 0));
  const common = quadraticForm(covariance, shares);
  return { u: Math.sqrt(independent + common), independent: Math.sqrt(independent), common: Math.sqrt(common) };
}

/** Standard uncertainty that the common part adds to each value taken alone. */
export function commonU({ values, sensitivities, covariance }: Compensated): Float64Array {
  return values.map((_, i) => Math.sqrt(quadraticForm(covariance, sensitivities.map((sensitivity) => sensitivity[i]))));
}

/** Two corrections, the second made on the first's values; their common parts are taken as independent of each other. */
export function chained(first: Compensated, second: Compensated): Compensated {
  const [a, b] = [first.sources.length, second.sources.length];
  const covariance = new Float64Array((a + b) ** 2);
  for (let i = 0; i < a; i++) covariance.set(first.covariance.subarray(i * a, (i + 1) * a), i * (a + b));
  for (let i = 0; i < b; i++) covariance.set(second.covariance.subarray(i * b, (i + 1) * b), (a + i) * (a + b) + a);
  return {
    values: second.values,
    independentU: first.independentU.map((u, i) => Math.hypot(u, second.independentU[i])),
    sources: [...first.sources, ...second.sources],
    sensitivities: [...first.sensitivities, ...second.sensitivities],
    covariance,
  };
}

function quadraticForm(matrix: Float64Array, vector: readonly number[]): number {
  const size = vector.length;
  let sum = 0;
  for (let i = 0; i < size; i++) for (let j = 0; j < size; j++) sum += vector[i] * matrix[i * size + j] * vector[j];
  return Math.max(sum, 0);
}
