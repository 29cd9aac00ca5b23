import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { bucketRuns as bucketRunsOf } from "@/lib/analysis/bucket-runs";
import { merge, singles } from "@/lib/phases/buckets";

type Values = { key: string; at: Float64Array; values: Float64Array };

const run = (key: string, values: readonly number[], start = 0): Values => ({ key, at: Float64Array.from(values, (_, i) => start + i), values: Float64Array.from(values) });
const bucketRuns = (given: readonly Values[], limit: number) => bucketRunsOf(given.map(({ key, at, values }) => ({ key, buckets: singles(at, values) })), limit);

const value = fc.double({ min: -1e9, max: 1e9, noNaN: true });
const runs = fc.array(fc.array(value, { minLength: 1, maxLength: 60 }), { minLength: 1, maxLength: 30 }).map((all) => all.map((values, i) => run(`phase ${i}`, values, i * 1000)));
const most = fc.integer({ min: 1, max: 50 });

describe("buckets of runs", () => {
  test("no extreme is dropped, no value is counted twice, and there are never more buckets than asked for", () => {
    fc.assert(
      fc.property(runs, most, (given, limit) => {
        const buckets = bucketRuns(given, limit);
        const values = given.flatMap(({ values: own }) => [...own]);
        expect(buckets.length).toBeLessThanOrEqual(limit);
        expect(Math.min(...buckets.map(({ min }) => min))).toBe(Math.min(...values));
        expect(Math.max(...buckets.map(({ max }) => max))).toBe(Math.max(...values));
        expect(buckets.reduce((sum, { n }) => sum + n, 0)).toBe(values.length);
      }),
    );
  });

  test("each bucket holds the extremes of its own stretch of time", () => {
    fc.assert(
      fc.property(runs, most, (given, limit) => {
        for (const { from, to, min, max, n } of bucketRuns(given, limit)) {
          const inside = given.flatMap(({ at, values }) => [...values].filter((_, i) => at[i] >= from && at[i] <= to));
          expect({ n: inside.length, min: Math.min(...inside), max: Math.max(...inside) }).toEqual({ n, min, max });
        }
      }),
    );
  });

  test("no bucket reaches over two runs while there are no more runs than buckets", () => {
    fc.assert(
      fc.property(runs, (given) => {
        const spans = new Map(given.map(({ key, at }) => [key, [at[0], at[at.length - 1]]]));
        for (const { key, from, to } of bucketRuns(given, given.length)) {
          const [first, last] = spans.get(key) ?? [];
          expect(from).toBeGreaterThanOrEqual(first ?? Infinity);
          expect(to).toBeLessThanOrEqual(last ?? -Infinity);
        }
      }),
    );
  });

  test("buckets come in the order of their runs, and the mean of all is kept", () => {
    fc.assert(
      fc.property(runs, most, (given, limit) => {
        const buckets = bucketRuns(given, limit);
        for (let i = 1; i < buckets.length; i++) expect(buckets[i].from).toBeGreaterThan(buckets[i - 1].to);
        const values = given.flatMap(({ values: own }) => [...own]);
        const mean = buckets.reduce((sum, { mean: own, n }) => sum + own * n, 0) / values.length;
        const scale = Math.max(1, ...values.map(Math.abs));
        expect(Math.abs(mean - values.reduce((sum, one) => sum + one, 0) / values.length) / scale).toBeLessThan(1e-9);
      }),
    );
  });

  test("from values put together before, nothing is lost either: extremes, counts and means are those of the values", () => {
    fc.assert(
      fc.property(runs, fc.integer({ min: 1, max: 20 }), most, (given, parts, limit) => {
        const before = given.map(({ key, at, values }) => ({ key, buckets: merge(singles(at, values), parts) }));
        for (const { from, to, min, max, mean, n } of bucketRunsOf(before, limit)) {
          const inside = given.flatMap(({ at, values }) => [...values].filter((_, i) => at[i] >= from && at[i] <= to));
          expect({ n: inside.length, min: Math.min(...inside), max: Math.max(...inside) }).toEqual({ n, min, max });
          const scale = Math.max(1, ...inside.map(Math.abs));
          expect(Math.abs(mean - inside.reduce((sum, one) => sum + one, 0) / n) / scale).toBeLessThan(1e-9);
        }
      }),
    );
  });

  test("with room for all, every value is its own bucket", () => {
    const buckets = bucketRuns([run("a", [3, 1, 2])], 3);
    expect(buckets).toEqual([3, 1, 2].map((own, i) => ({ key: "a", from: i, to: i, min: own, max: own, mean: own, n: 1 })));
  });

  test("of more runs than buckets, neighbours share one under the key of the first", () => {
    expect(bucketRuns([run("a", [1], 0), run("b", [5], 10), run("c", [2], 20), run("d", [4], 30)], 2)).toEqual([
      { key: "a", from: 0, to: 10, min: 1, max: 5, mean: 3, n: 2 },
      { key: "c", from: 20, to: 30, min: 2, max: 4, mean: 3, n: 2 },
    ]);
  });

  test("without runs there are no buckets", () => expect(bucketRuns([], 10)).toEqual([]));

  test.each([0, -1, 1.5, NaN])("%d buckets are refused", (limit) => expect(() => bucketRuns([run("a", [1])], limit)).toThrow(RangeError));
});
