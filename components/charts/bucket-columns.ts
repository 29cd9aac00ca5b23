/** Large series as one column a pixel: lowest, highest, mean. Pure. */

/** Made on the server; one repeat is a bucket with from = to, min = max = mean and n = 1. */
export type Bucket = { from: string; to: string; min: number; max: number; mean: number; n: number };

/** A stretch of time in which was measured without a break; lines never leave it. */
export type Span = { from: string; to: string };

export type BucketColumn = { x: number; at: number; low: number; high: number; mean: number; n: number };

/** A step over this many usual steps is a gap where no phases say so. */
const GAP_IN_STEPS = 2.5;

/**
 * Merges buckets that fall on the same pixel column (means weighted by n) and parts them into stretches:
 * at the ends of `phases` where those are given, else where the step to the next bucket is over 2.5 times the usual (median) one.
 * Buckets with n = 0 or without a finite mean, and those that `place` puts nowhere, are left out and count as a gap only by the time they leave empty.
 */
export function bucketStretches(buckets: readonly Bucket[], place: (at: number) => number | undefined, phases?: readonly Span[]): BucketColumn[][] {
  const kept = buckets.flatMap((bucket) => {
    if (!(bucket.n > 0) || !Number.isFinite(bucket.mean)) return [];
    const at = (Date.parse(bucket.from) + Date.parse(bucket.to)) / 2;
    const x = place(at);
    return x === undefined ? [] : [{ bucket, at, x: Math.round(x) }];
  });
  const phaseOf = phases && phases.length > 0 ? phaseFinder(phases) : undefined;
  const usual = phaseOf ? Infinity : medianStep(kept.map(({ at }) => at));

  const stretches: BucketColumn[][] = [];
  let before: { at: number; phase: number } | undefined;
  for (const { bucket, at, x } of kept) {
    const phase = phaseOf ? phaseOf(at) : 0;
    if (!before || phase !== before.phase || at - before.at > GAP_IN_STEPS * usual) stretches.push([]);
    before = { at, phase };
    const stretch = stretches[stretches.length - 1];
    const column = stretch?.[stretch.length - 1];
    if (column?.x === x) {
      column.low = Math.min(column.low, bucket.min);
      column.high = Math.max(column.high, bucket.max);
      column.mean = (column.mean * column.n + bucket.mean * bucket.n) / (column.n + bucket.n);
      column.at = (column.at * column.n + at * bucket.n) / (column.n + bucket.n);
      column.n += bucket.n;
    } else stretch?.push({ x, at, low: bucket.min, high: bucket.max, mean: bucket.mean, n: bucket.n });
  }
  return stretches;
}

/** Place of the phase that holds a time, −1 between phases; times must not go back. */
function phaseFinder(phases: readonly Span[]) {
  const spans = phases.map(({ from, to }) => [Date.parse(from), Date.parse(to)] as const).sort((a, b) => a[0] - b[0]);
  let i = 0;
  return (at: number) => {
    while (i < spans.length && at > (spans[i]?.[1] ?? -Infinity)) i++;
    return i < spans.length && at >= (spans[i]?.[0] ?? Infinity) ? i : -1 - i;
  };
}

function medianStep(times: readonly number[]): number {
  const steps = times.slice(1).map((at, i) => at - (times[i] ?? at)).filter((step) => step > 0).sort((a, b) => a - b);
  return steps[Math.floor(steps.length / 2)] ?? Infinity;
}
