/**
 * Median: the middle value, or the mean of the two middle ones. The values are left as they are.
 *
 * @returns NaN when there are no values or one is NaN.
 */
export function median(values: Float64Array): number {
  const sorted = values.slice().sort(); // NaN sorts last
  const n = sorted.length;
  if (n === 0 || Number.isNaN(sorted[n - 1])) return NaN;
  return n % 2 === 1 ? sorted[(n - 1) / 2] : (sorted[n / 2 - 1] + sorted[n / 2]) / 2;
}
