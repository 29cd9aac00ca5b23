/**
 * Values by rising time, several to a bucket, in columns: first and last time (ms since 1970), extremes, mean and how many.
 * Single values are buckets of one.
 */
export type Buckets = {
  from: Float64Array;
  to: Float64Array;
  min: Float64Array;
  max: Float64Array;
  mean: Float64Array;
  count: Float64Array;
};

const FIELDS = ["from", "to", "min", "max", "mean", "count"] as const satisfies readonly (keyof Buckets)[];

/** Every value a bucket of its own; shares memory with what is given. */
export const singles = (at: Float64Array, values: Float64Array): Buckets => ({ from: at, to: at, min: values, max: values, mean: values, count: new Float64Array(values.length).fill(1) });

export const countOf = ({ count }: Buckets): number => count.reduce((sum, n) => sum + n, 0);

/**
 * The buckets in at most `parts` parts of about equally many values. A bucket is never split, so with buckets of several
 * values the parts are only nearly equal and may be fewer; extremes and counts are exact, means weighted by the counts.
 *
 * @param parts A whole number ≥ 1.
 */
export function merge(buckets: Buckets, parts: number): Buckets {
  if (!Number.isInteger(parts) || parts < 1) throw new RangeError(`parts must be a whole number ≥ 1, got ${parts}`);
  const total = countOf(buckets);
  const merged = emptyBuckets(Math.min(parts, buckets.count.length));
  let filled = 0;
  let before = 0;
  let part = -1;
  for (let i = 0; i < buckets.count.length; i++) {
    const middle = before + (buckets.count[i] - 1) / 2;
    before += buckets.count[i];
    const own = partOf(middle, parts, total);
    if (own !== part) {
      part = own;
      start(merged, filled++);
    }
    add(merged, filled - 1, buckets, i);
  }
  return slice(merged, filled);
}

/** All of several runs of buckets as one bucket. */
export function mergeAll(runs: readonly Buckets[]): Buckets {
  const merged = emptyBuckets(1);
  start(merged, 0);
  for (const run of runs) for (let i = 0; i < run.count.length; i++) add(merged, 0, run, i);
  return merged;
}

/** The part k whose values floor(k·total/parts) … floor((k+1)·total/parts) − 1 hold the place. */
function partOf(place: number, parts: number, total: number): number {
  const guess = Math.min(parts - 1, Math.floor((place * parts) / total));
  return guess + 1 < parts && place >= Math.floor(((guess + 1) * total) / parts) ? guess + 1 : guess;
}

function start({ from, to, min, max, mean, count }: Buckets, i: number): void {
  from[i] = Infinity;
  to[i] = -Infinity;
  min[i] = Infinity;
  max[i] = -Infinity;
  mean[i] = 0;
  count[i] = 0;
}

function add(into: Buckets, k: number, of: Buckets, i: number): void {
  into.count[k] += of.count[i];
  into.mean[k] += ((of.mean[i] - into.mean[k]) * of.count[i]) / into.count[k];
  if (of.from[i] < into.from[k]) into.from[k] = of.from[i];
  if (of.to[i] > into.to[k]) into.to[k] = of.to[i];
  if (of.min[i] < into.min[k]) into.min[k] = of.min[i];
  if (of.max[i] > into.max[k]) into.max[k] = of.max[i];
}

function emptyBuckets(n: number): Buckets {
  return bucketsOn(new ArrayBuffer(n * 8 * FIELDS.length), n);
}

function bucketsOn(buffer: ArrayBuffer, n: number): Buckets {
  const [from, to, min, max, mean, count] = FIELDS.map((_, k) => new Float64Array(buffer, 8 * n * k, n));
  return { from, to, min, max, mean, count };
}

const slice = (buckets: Buckets, n: number): Buckets => Object.fromEntries(FIELDS.map((field) => [field, buckets[field].subarray(0, n)])) as Buckets;

/** Little-endian bytes for `phase_level.buckets`. */
export const encodeBuckets = (buckets: Buckets): Buffer =>
  Buffer.concat(FIELDS.map((field) => new Uint8Array(buckets[field].buffer, buckets[field].byteOffset, buckets[field].byteLength)));

/** @throws RangeError when the length is no whole number of buckets. */
export function decodeBuckets(bytes: Buffer): Buckets {
  const n = bytes.byteLength / (8 * FIELDS.length);
  if (!Number.isInteger(n)) throw new RangeError(`${bytes.byteLength} bytes are no whole number of buckets`);
  const buffer = new ArrayBuffer(bytes.byteLength);
  new Uint8Array(buffer).set(bytes);
  return bucketsOn(buffer, n);
}
