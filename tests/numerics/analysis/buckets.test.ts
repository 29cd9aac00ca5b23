import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { countOf, decodeBuckets, encodeBuckets, merge, mergeAll, singles } from "@/lib/phases/buckets";
import { courseOf, keptOf, levelFor, partsStored } from "@/lib/phases/levels";

const of = (values: readonly number[]) => singles(Float64Array.from(values, (_, i) => 1000 * i), Float64Array.from(values));

describe("merging buckets", () => {
  test("single values are cut where equal parts end", () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 300 }), fc.integer({ min: 1, max: 40 }), (n, parts) => {
        const bounds = Array.from({ length: parts + 1 }, (_, k) => Math.floor((k * n) / parts));
        const sizes = bounds.slice(1).map((end, k) => end - bounds[k]);
        expect([...merge(of(Array(n).fill(0)), parts).count]).toEqual(sizes.filter((size) => size > 0));
      }),
    );
  });

  test("in steps or at once, the whole has one extent, one pair of extremes and one mean", () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 300 }), fc.integer({ min: 1, max: 40 }), (values, parts) => {
        const direct = mergeAll([of(values)]);
        const stepped = mergeAll([merge(merge(of(values), parts), Math.ceil(parts / 3))]);
        for (const field of ["from", "to", "min", "max", "count"] as const) expect(stepped[field][0]).toBe(direct[field][0]);
        expect(stepped.mean[0]).toBeCloseTo(direct.mean[0], 5);
      }),
    );
  });

  test("a bucket is never split: of three buckets no four parts are made", () => {
    const coarse = merge(of([1, 2, 3, 4, 5, 6]), 3);
    expect(merge(coarse, 4)).toEqual(coarse);
  });

  test("bytes read back as what was written, whatever array they were cut from", () => {
    const buckets = merge(of([5, -1, 2.5, 8, 13]), 2);
    expect(decodeBuckets(encodeBuckets(buckets))).toEqual(buckets);
    expect(decodeBuckets(encodeBuckets(merge(of([]), 4))).count).toHaveLength(0);
    expect(() => decodeBuckets(Buffer.alloc(47))).toThrow(RangeError);
  });
});

describe("levels of a phase", () => {
  test("what is left out or has no value is in no bucket", () => {
    const kept = keptOf({ at: Float64Array.of(0, 1, 2, 3), leftOut: Uint8Array.of(1, 0, 0, 0), values: Float64Array.of(9, 1, NaN, 2) });
    expect([...kept.mean]).toEqual([1, 2]);
    expect([...kept.from]).toEqual([1, 3]);
    expect(countOf(kept)).toBe(2);
  });

  test("only levels are kept that are much smaller than the columns, and every phase has its coarsest", () => {
    expect(partsStored(1)).toEqual([1]);
    expect(partsStored(63)).toEqual([1]);
    expect(partsStored(64)).toEqual([1, 16]);
    expect(partsStored(2000)).toEqual([1, 16, 128]);
    expect(partsStored(100_000)).toEqual([1, 16, 128, 1024]);
  });

  test("a plot is made from a level four times as fine as itself, or from the repeats", () => {
    expect(levelFor(1, 2000)).toBe(1);
    expect(levelFor(2, 2000)).toBe(16);
    expect(levelFor(4, 2000)).toBe(16);
    expect(levelFor(5, 2000)).toBe(128);
    expect(levelFor(33, 2000)).toBeUndefined();
    expect(levelFor(33, 100_000)).toBe(1024);
  });

  test("the course holds those left out too, and says where nothing was fitted", () => {
    expect(courseOf(Float64Array.of(1, 2, NaN))).toEqual([1, 2, null]);
    expect(courseOf(Float64Array.from({ length: 48 }, (_, i) => 2400 + i))).toEqual(Array.from({ length: 24 }, (_, i) => 2400.5 + 2 * i));
    expect(courseOf(new Float64Array())).toEqual([]);
  });
});
