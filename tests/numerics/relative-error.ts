/** Size of the difference relative to the expected value; infinite when nothing was found. */
export function relativeError(found: number | undefined, expected: number): number {
  if (found === undefined || Number.isNaN(found)) return Infinity;
  return Math.abs(found - expected) / (expected === 0 ? 1 : Math.abs(expected));
}
