import { median } from "@/lib/numerics/statistics/median";

/** A spacing above this many τ₀ is a gap. */
const gapInTau0 = 1.5;

/**
 * Cuts a series into stretches without a gap, so that no statistic silently joins what was not recorded together.
 *
 * τ₀ is the median spacing of all readings, those left out included: they took their time too. A stretch ends where
 * the spacing exceeds 1.5 τ₀ or a reading is left out.
 *
 * @param atS Times in seconds, not falling, one per reading.
 * @param y Values, one per reading, finite where not left out.
 * @param leftOut Not 0 where a reading does not count; its value may be NaN.
 * @returns `tau0S` in seconds (NaN below two readings), the stretches, oldest first, each with at least one value and
 *   sharing memory with `y`, and the time `startsS` of the first value of each.
 * @throws RangeError if lengths differ, times fall or mostly coincide, or a value used is not finite.
 */
export function stretches({ atS, y, leftOut }: { atS: Float64Array; y: Float64Array; leftOut?: Uint8Array }): {
  tau0S: number;
  stretches: Float64Array[];
  startsS: Float64Array;
} {
  if (atS.length !== y.length || (leftOut && leftOut.length !== y.length)) {
    throw new RangeError("times, values and marks must be equally many");
  }
  const tau0S = medianSpacing(atS);

  const found: Float64Array[] = [];
  const startsS: number[] = [];
  let start = 0;
  const close = (end: number) => {
    if (end > start) {
      found.push(y.subarray(start, end));
      startsS.push(atS[start]);
    }
  };
  for (let i = 0; i < y.length; i++) {
    if (leftOut && leftOut[i] !== 0) {
      close(i);
      start = i + 1;
      continue;
    }
    if (!Number.isFinite(y[i])) throw new RangeError(`value ${i} is not finite and not left out`);
    if (i > start && atS[i] - atS[i - 1] > gapInTau0 * tau0S) {
      close(i);
      start = i;
    }
  }
  close(y.length);
  return { tau0S, stretches: found, startsS: Float64Array.from(startsS) };
}

function medianSpacing(atS: Float64Array): number {
  if (atS.length < 2) return NaN;
  const spacings = new Float64Array(atS.length - 1);
  for (let i = 0; i < spacings.length; i++) {
    spacings[i] = atS[i + 1] - atS[i];
    if (!(spacings[i] >= 0)) throw new RangeError(`times must not fall, at reading ${i + 1}`);
  }
  const spacing = median(spacings);
  if (!(spacing > 0)) throw new RangeError("most readings have the same time");
  return spacing;
}
