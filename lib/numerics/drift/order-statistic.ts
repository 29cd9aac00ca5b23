/**
 * The k-th smallest value (k from 0) of values[0 … length), which are reordered: smaller ones end before it, larger
 * ones after. Linear in their number on average. All values finite.
 *
 * Source: C. A. R. Hoare, Algorithm 65: Find, Communications of the ACM 4 (1961) 321.
 */
export function orderStatistic(values: Float64Array, k: number): number {
  if (!(k >= 0 && k < values.length)) throw new RangeError(`there is no rank ${k} among ${values.length} values`);
  let low = 0;
  let high = values.length - 1;
  while (low < high) {
    const pivot = values[k];
    let i = low;
    let j = high;
    while (i <= j) {
      while (values[i] < pivot) i++;
      while (values[j] > pivot) j--;
      if (i > j) break;
      const held = values[i];
      values[i++] = values[j];
      values[j--] = held;
    }
    if (j < k) low = i;
    if (k < i) high = j;
  }
  return values[k];
}
