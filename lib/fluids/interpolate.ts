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
