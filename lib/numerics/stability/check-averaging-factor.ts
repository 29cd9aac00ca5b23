/** @throws RangeError unless m is a whole number ≥ 1. */
export function checkAveragingFactor(m: number): void {
  if (!Number.isInteger(m) || m < 1) throw new RangeError(`m must be a whole number ≥ 1, got ${m}`);
}
