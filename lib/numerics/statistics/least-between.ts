const golden = (Math.sqrt(5) - 1) / 2;

/**
 * Where a function of one variable is least between two ends: the best of an even grid, narrowed by golden section.
 *
 * @param gridPoints Intervals of the grid; it must be fine enough to tell the lowest valley from the others.
 * @param width Width of the last interval, in the unit of the variable.
 */
export function leastBetween(
  of: (at: number) => number,
  { low, high, gridPoints, width }: { low: number; high: number; gridPoints: number; width: number },
): number {
  const step = (high - low) / gridPoints;
  let best = low;
  let least = Infinity;
  for (let i = 0; i <= gridPoints; i++) {
    const value = of(low + i * step);
    if (value < least) [least, best] = [value, low + i * step];
  }

  let left = Math.max(low, best - step);
  let right = Math.min(high, best + step);
  let [inner, outer] = [right - golden * (right - left), left + golden * (right - left)];
  let [atInner, atOuter] = [of(inner), of(outer)];
  while (right - left > width) {
    if (atInner < atOuter) {
      right = outer;
      [outer, atOuter] = [inner, atInner];
      inner = right - golden * (right - left);
      atInner = of(inner);
    } else {
      left = inner;
      [inner, atInner] = [outer, atOuter];
      outer = left + golden * (right - left);
      atOuter = of(outer);
    }
  }
  return (left + right) / 2;
}
