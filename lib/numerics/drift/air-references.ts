/** What was done just before an air reference: an ordinary clean, the same clean once more, or a new mount. */
export type Before = "clean" | "cleanAgain" | "remount";

/** Air references in order of time, all of one sensor and set-point. */
export type AirReferences = {
  atDays: Float64Array;
  /** Against one fixed value, in ppm of f0 and percent of Q; a re-mount may move both freely. */
  f0Ppm: Float64Array;
  qPercent: Float64Array;
  before: readonly Before[];
  /** Q in air, of the baseline. */
  baselineQ: number;
};

/** @throws RangeError if lengths differ, times do not rise, a value is not finite or Q is not above 0. */
export function checkReferences({ atDays, f0Ppm, qPercent, before, baselineQ }: AirReferences): void {
  const n = atDays.length;
  if (f0Ppm.length !== n || qPercent.length !== n || before.length !== n) throw new RangeError("references must have a time, f0, Q and what was before");
  if (!(baselineQ > 0)) throw new RangeError(`Q must be above 0, got ${baselineQ}`);
  if (![atDays, f0Ppm, qPercent].every((one) => one.every(Number.isFinite))) throw new RangeError("a value is not finite");
  if (atDays.some((day, i) => i > 0 && !(day > atDays[i - 1]))) throw new RangeError("times must rise");
}
