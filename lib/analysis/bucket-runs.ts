import { countOf, merge, mergeAll, type Buckets } from "@/lib/phases/buckets";

export type Run<Key> = { key: Key; buckets: Buckets };

export type Bucket<Key> = { key: Key; from: number; to: number; min: number; max: number; mean: number; n: number };

/**
 * Cuts runs of values into at most `most` buckets of about equally many values, each with its extremes and mean. A bucket
 * stays within one run while there are no more runs than buckets; beyond that neighbouring runs share one. A bucket of
 * several runs carries the key of its first.
 *
 * @param runs Times rising within a run, values finite, no run empty; single values, or buckets of several already.
 * @param most A whole number ≥ 1.
 */
export function bucketRuns<Key>(runs: readonly Run<Key>[], most: number): Bucket<Key>[] {
  if (!Number.isInteger(most) || most < 1) throw new RangeError(`most must be a whole number ≥ 1, got ${most}`);
  if (runs.length > most) return bucketAcross(runs, most);

  const counts = runs.map(({ buckets }) => countOf(buckets));
  const size = smallestSize(counts, most);
  return runs.flatMap(({ key, buckets }, i) => listed(key, merge(buckets, Math.ceil(counts[i] / size))));
}

/** The fewest values a bucket can have so that runs of so many values together need no more than `most`; 1 without runs. */
export function smallestSize(counts: readonly number[], most: number): number {
  let low = 1;
  let high = counts.reduce((longest, count) => Math.max(longest, count), 1);
  while (low < high) {
    const middle = Math.floor((low + high) / 2);
    const needed = counts.reduce((sum, count) => sum + Math.ceil(count / middle), 0);
    if (needed <= most) high = middle;
    else low = middle + 1;
  }
  return low;
}

function bucketAcross<Key>(runs: readonly Run<Key>[], most: number): Bucket<Key>[] {
  return Array.from({ length: most }, (_, piece) => {
    const from = Math.floor((piece * runs.length) / most);
    const to = Math.floor(((piece + 1) * runs.length) / most);
    return listed(runs[from].key, mergeAll(runs.slice(from, to).map(({ buckets }) => buckets)));
  }).flat();
}

const listed = <Key>(key: Key, { from, to, min, max, mean, count }: Buckets): Bucket<Key>[] =>
  Array.from(count, (n, i) => ({ key, from: from[i], to: to[i], min: min[i], max: max[i], mean: mean[i], n }));
