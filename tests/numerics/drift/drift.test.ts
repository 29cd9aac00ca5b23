import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { drift } from "@/lib/numerics/drift/drift";
import { leastSquaresLine } from "@/lib/numerics/drift/least-squares-line";
import { mannKendall } from "@/lib/numerics/drift/mann-kendall";
import { orderStatistic } from "@/lib/numerics/drift/order-statistic";
import { theilSen } from "@/lib/numerics/drift/theil-sen";
import { gaussian } from "@/tests/numerics/seeded-noise";

const days = (n: number) => Float64Array.from({ length: n }, (_, i) => i / 3);

describe("drift", () => {
  const next = gaussian(12);
  const atDays = days(90);
  const values = atDays.map((day) => 1000 + 0.02 * day + 0.1 * next());

  test("the true slope lies within the intervals of all three lines", () => {
    const found = drift({ atDays, values });
    for (const line of [found, found?.leastSquares, found?.theilSen]) {
      expect(line?.lower).toBeLessThan(0.02);
      expect(line?.upper).toBeGreaterThan(0.02);
      expect(Math.abs((line?.slopePerDay ?? NaN) - 0.02)).toBeLessThan(0.005);
    }
    expect(found?.n).toBe(90);
    expect(found?.intercept).toBeCloseTo(1000, 0);
  });

  test("a wild value moves the ordinary line, hardly the robust one", () => {
    const wild = drift({ atDays, values: values.with(85, 1050) });
    expect(Math.abs((wild?.theilSen.slopePerDay ?? NaN) - 0.02)).toBeLessThan(0.005);
    expect(Math.abs((wild?.leastSquares.slopePerDay ?? NaN) - 0.02)).toBeGreaterThan(0.02);
  });

  test("uncertainties of the values weigh the ordinary line", () => {
    const u = new Float64Array(90).fill(0.1).with(85, 1e6);
    const weighted = drift({ atDays, values: values.with(85, 1050), u });
    expect(Math.abs((weighted?.leastSquares.slopePerDay ?? NaN) - 0.02)).toBeLessThan(0.005);
  });

  test("below three values there is none", () => {
    expect(drift({ atDays: days(2), values: Float64Array.of(1, 2) })).toBeUndefined();
    expect(drift({ atDays: new Float64Array(0), values: new Float64Array(0) })).toBeUndefined();
  });

  test("three values give a slope and a wide interval", () => {
    const found = drift({ atDays: days(3), values: Float64Array.of(1, 2, 1.5) });
    expect(found?.slopePerDay).toBeCloseTo(0.75, 6);
    expect((found?.upper ?? NaN) - (found?.lower ?? NaN)).toBeGreaterThan(5);
  });

  test("equal values have no drift and no uncertainty", () => {
    expect(drift({ atDays: days(6), values: new Float64Array(6).fill(8) })).toMatchObject({ slopePerDay: 0, u: 0, lower: 0, upper: 0 });
  });
});

test("order statistics equal a full sort", () => {
  fc.assert(
    fc.property(fc.array(fc.integer({ min: -5, max: 5 }), { minLength: 1, maxLength: 60 }), fc.nat(), (list, pick) => {
      const k = pick % list.length;
      expect(orderStatistic(Float64Array.from(list), k)).toBe(Float64Array.from(list).sort()[k]);
    }),
  );
  expect(() => orderStatistic(Float64Array.of(1), 1)).toThrow(RangeError);
});

test("robust line: shift, scale and reversal of time", () => {
  const series = fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 3, maxLength: 40 });
  fc.assert(
    fc.property(series, fc.integer({ min: -50, max: 50 }), (list, shift) => {
      const y = Float64Array.from(list);
      const x = days(y.length);
      const plain = theilSen({ x, y });
      const moved = theilSen({ x, y: y.map((value) => 2 * value + shift) });
      expect(moved?.slope).toBeCloseTo(2 * (plain?.slope ?? NaN), 8);
      const reversed = theilSen({ x, y: y.slice().reverse() });
      expect(reversed?.slope).toBeCloseTo(-(plain?.slope ?? NaN), 8);
      expect(reversed?.lower).toBeCloseTo(-(plain?.upper ?? NaN), 8);
    }),
  );
});

test("robust line: more than 5 000 values are taken as block means, said so", () => {
  const n = 6000;
  const next = gaussian(4);
  const x = Float64Array.from({ length: n }, (_, i) => i);
  const found = theilSen({ x, y: x.map((time) => 0.01 * time + next()) });
  expect(found).toMatchObject({ blockLength: 2, n: 3000 });
  expect(found?.slope).toBeCloseTo(0.01, 4);
});

test("robust line: equal times are passed over, all equal are an error", () => {
  expect(theilSen({ x: Float64Array.of(0, 0, 1), y: Float64Array.of(1, 3, 5) })?.slope).toBe(3);
  expect(() => theilSen({ x: Float64Array.of(1, 1, 1), y: Float64Array.of(1, 3, 5) })).toThrow(RangeError);
  expect(() => theilSen({ x: Float64Array.of(0, 1, 2), y: Float64Array.of(1, NaN, 5) })).toThrow(RangeError);
});

test("ordinary line: impossible input is an error", () => {
  const x = Float64Array.of(0, 1, 2);
  expect(() => leastSquaresLine({ x, y: x, u: Float64Array.of(1, 0, 1) })).toThrow(RangeError);
  expect(() => leastSquaresLine({ x: new Float64Array(3), y: x })).toThrow(RangeError);
  expect(() => leastSquaresLine({ x, y: Float64Array.of(0, NaN, 1) })).toThrow(RangeError);
});

test("trend test: a rise and its reversal differ in sign only; nothing below three values", () => {
  const rise = Float64Array.of(1, 3, 2, 5, 6, 4, 8);
  const [up, down] = [mannKendall(rise), mannKendall(rise.slice().reverse())];
  expect(up?.s).toBe(-(down?.s ?? NaN));
  expect(up?.p).toBe(down?.p);
  expect(mannKendall(Float64Array.of(1, 2))).toBeUndefined();
  expect(mannKendall(new Float64Array(5).fill(1))).toMatchObject({ s: 0, z: 0, p: 1 });
  expect(() => mannKendall(Float64Array.of(1, NaN, 2))).toThrow(RangeError);
});
