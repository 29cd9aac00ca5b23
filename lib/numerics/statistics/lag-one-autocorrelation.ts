/**
 * Lag-1 autocorrelation about the mean: r₁ = Σ (y[i] − ȳ)(y[i−1] − ȳ) / Σ (y[i] − ȳ)².
 *
 * @param values Evenly spaced, all finite.
 * @returns Between −1 and 1, without unit; NaN below two values or when they are all equal.
 *
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods, section 1.3.5.12.
 */
export function lagOneAutocorrelation(values: Float64Array): number {
  if (values.length < 2) return NaN;
  const first = values[0];
  let mean = 0; // of the values less the first, which keeps digits when the offset is large
  for (const value of values) mean += value - first;
  mean /= values.length;

  let products = 0;
  let squares = 0;
  let before = 0;
  for (const value of values) {
    const residual = value - first - mean;
    products += residual * before;
    squares += residual ** 2;
    before = residual;
  }
  return products / squares;
}
