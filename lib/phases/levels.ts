import { singles, type Buckets } from "@/lib/phases/buckets";
import type { PhaseColumns } from "@/lib/phases/columns";

export const QUANTITIES = ["f0", "q", "temperature"] as const;
export type Quantity = (typeof QUANTITIES)[number];

const PARTS = [1, 16, 128, 1024] as const;
/** Repeats a part has to stand for: a level with more parts would hardly be smaller than the columns. */
const WORTH = 4;
/** Stored parts that make one bucket of a plot, at least: fewer would make buckets of uneven length. */
export const FINER = 4;

const COURSE_PARTS = 24;

/** In how many parts a phase of n repeats is stored. */
export const partsStored = (n: number): number[] => PARTS.filter((parts) => parts === 1 || parts * WORTH <= n);

/** The coarsest stored level that a phase of n repeats can be drawn from in so many buckets; undefined where only its columns will do. */
export const levelFor = (buckets: number, n: number): number | undefined => partsStored(n).find((parts) => (buckets <= 1 ? parts === 1 : parts >= FINER * buckets));

export const valuesOf = (columns: PhaseColumns, quantity: Quantity): Float64Array => (quantity === "f0" ? columns.f0Hz : quantity === "q" ? columns.q : columns.temperatureC);

/** The repeats that count, with a value, each a bucket of its own. */
export function keptOf({ at, leftOut, values }: { at: Float64Array; leftOut: Uint8Array; values: Float64Array }): Buckets {
  const keptAt = new Float64Array(at.length);
  const kept = new Float64Array(at.length);
  let n = 0;
  for (let i = 0; i < at.length; i++) {
    if (leftOut[i] || !Number.isFinite(values[i])) continue;
    keptAt[n] = at[i];
    kept[n++] = values[i];
  }
  return singles(keptAt.subarray(0, n), kept.subarray(0, n));
}

/** Means of f0 over at most 24 equal parts of the whole phase, those left out included; null where a part has no fit. */
export function courseOf(f0Hz: Float64Array): (number | null)[] {
  const n = f0Hz.length;
  const parts = Math.min(n, COURSE_PARTS);
  return Array.from({ length: parts }, (_, part) => {
    const fitted = f0Hz.subarray(Math.floor((part * n) / parts), Math.floor(((part + 1) * n) / parts)).filter(Number.isFinite);
    return fitted.length > 0 ? fitted[0] + fitted.reduce((sum, value) => sum + (value - fitted[0]), 0) / fitted.length : null;
  });
}
