/**
 * Straight line between the two neighbours of x in a table.
 *
 * @param xs Ascending, at least one, finite.
 * @param ys As many values.
 * @param x Inside [xs[0], xs[last]]; the caller checks.
 */
export function interpolate(xs: readonly number[], ys: readonly number[], x: number): number {
  let upper = 1;
  while (upper < xs.length - 1 && xs[upper] < x) upper++;
  if (xs.length === 1 || x === xs[0]) return ys[0];
  const share = (x - xs[upper - 1]) / (xs[upper] - xs[upper - 1]);
  return ys[upper - 1] + share * (ys[upper] - ys[upper - 1]);
}

/**
 * Lagrange's cubic through the four neighbours of x, for smooth tables with few rows.
 *
 * @param xs Ascending, at least four, finite.
 * @param ys As many values.
 * @param x Inside [xs[0], xs[last]]; the caller checks.
 */
export function interpolateCubic(xs: readonly number[], ys: readonly number[], x: number): number {
  let upper = 1;
  while (upper < xs.length - 1 && xs[upper] < x) upper++;
  const first = Math.min(Math.max(upper - 2, 0), xs.length - 4);
  let sum = 0;
  for (let i = first; i < first + 4; i++) {
    let weight = 1;
    for (let j = first; j < first + 4; j++) if (j !== i) weight *= (x - xs[j]) / (xs[i] - xs[j]);
    sum += weight * ys[i];
  }
  return sum;
}
