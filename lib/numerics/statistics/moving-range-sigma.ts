/** Expected range of two normal values in standard deviations, as tabulated in ISO 7870-2. */
const d2 = 1.128;

/**
 * Standard deviation from the mean moving range of two: σ = mean |x[i] − x[i−1]| / 1.128. A step or slow drift in the
 * record raises it far less than it raises the ordinary standard deviation.
 *
 * @param values In order of time, all finite.
 * @returns In the unit of the values; NaN below two values.
 *
 * Source: ISO 7870-2, individuals chart; NIST/SEMATECH e-Handbook of Statistical Methods, section 6.3.2.2.
 */
export function movingRangeSigma(values: Float64Array): number {
  let sum = 0;
  for (let i = 1; i < values.length; i++) sum += Math.abs(values[i] - values[i - 1]);
  return values.length < 2 ? NaN : sum / (values.length - 1) / d2;
}
