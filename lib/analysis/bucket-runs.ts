export type Run<Key> = { key: Key; at: Float64Array; values: Float64Array };

export type Bucket<Key> = { key: Key; from: number; to: number; min: number; max: number; mean: number; n: number };

/**
 * Cuts runs of values into at most `most` buckets of about equally many values, each with its extremes and mean. A bucket
 * stays within one run while there are no more runs than buckets; beyond that neighbouring runs share one. A bucket of
 * several runs carries the key of its first.
 *
 * @param runs Times rising within a run, values finite, no run empty.
 * @param most A whole number ≥ 1.
 */
export function bucketRuns<Key>(runs: readonly Run<Key>[], most: number): Bucket<Key>[] {
  if (!Number.isInteger(most) || most < 1) throw new RangeError(`most must be a whole number ≥ 1, got ${most}`);
  if (runs.length > most) return bucketAcross(runs, most);

  const size = smallestSize(runs, most);
  return runs.flatMap((run) => {
    const pieces = Math.ceil(run.at.length / size);
    return Array.from({ length: pieces }, (_, piece) => {
      const bucket = emptyBucket(run.key);
      const from = Math.floor((piece * run.at.length) / pieces);
      const to = Math.floor(((piece + 1) * run.at.length) / pieces);
      for (let i = from; i < to; i++) add(bucket, run.at[i], run.values[i]);
      return bucket;
    });
  });
}

/** The fewest values a bucket can have so that all runs together need no more than `most`. */
function smallestSize<Key>(runs: readonly Run<Key>[], most: number): number {
  let low = 1;
  let high = runs.reduce((longest, { at }) => Math.max(longest, at.length), 1);
  while (low < high) {
    const middle = Math.floor((low + high) / 2);
    const needed = runs.reduce((sum, { at }) => sum + Math.ceil(at.length / middle), 0);
    if (needed <= most) high = middle;
    else low = middle + 1;
  }
  return low;
}

function bucketAcross<Key>(runs: readonly Run<Key>[], most: number): Bucket<Key>[] {
  return Array.from({ length: most }, (_, piece) => {
    const from = Math.floor((piece * runs.length) / most);
    const to = Math.floor(((piece + 1) * runs.length) / most);
    const bucket = emptyBucket(runs[from].key);
    for (const run of runs.slice(from, to)) for (let i = 0; i < run.at.length; i++) add(bucket, run.at[i], run.values[i]);
    return bucket;
  });
}

const emptyBucket = <Key>(key: Key): Bucket<Key> => ({ key, from: Infinity, to: -Infinity, min: Infinity, max: -Infinity, mean: 0, n: 0 });

function add<Key>(bucket: Bucket<Key>, at: number, value: number): void {
  bucket.n++;
  bucket.mean += (value - bucket.mean) / bucket.n;
  if (at < bucket.from) bucket.from = at;
  if (at > bucket.to) bucket.to = at;
  if (value < bucket.min) bucket.min = value;
  if (value > bucket.max) bucket.max = value;
}
