import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { deviation, type Statistic } from "@/lib/numerics/stability/deviation";
import { termsIn } from "@/lib/numerics/stability/statistic-shape";

const statistics: Statistic[] = ["adev", "oadev", "mdev", "tdev", "hdev", "ohdev", "totdev"];
const value = fc.double({ min: -1000, max: 1000, noNaN: true });
const series = fc.array(value, { minLength: 12, maxLength: 80 }).map((values) => Float64Array.from(values));
const factor = fc.integer({ min: 1, max: 4 });

/** Equal but for rounding, for deviations of values up to `size`. */
function expectEqual(found: number | undefined, expected: number | undefined, size = 1000): void {
  expect(Math.abs((found ?? NaN) - (expected ?? NaN))).toBeLessThan(1e-9 * size);
}

describe.each(statistics)("%s", (statistic) => {
  const of = (y: Float64Array, m: number) => deviation(statistic, [y], m);

  test("a shift of all values changes nothing", () => {
    fc.assert(
      fc.property(series, factor, value, (y, m, shift) => {
        expectEqual(of(y.map((one) => one + shift), m)?.deviation, of(y, m)?.deviation);
      }),
    );
  });

  test("it scales with the values", () => {
    fc.assert(
      fc.property(series, factor, fc.double({ min: -8, max: 8, noNaN: true }), (y, m, scale) => {
        const scaled = of(y.map((one) => one * scale), m);
        expectEqual(scaled?.deviation, Math.abs(scale) * (of(y, m)?.deviation ?? NaN), 8000);
      }),
    );
  });

  test("reversing time changes nothing", () => {
    fc.assert(
      fc.property(series, factor, (y, m) => {
        const whole = y.subarray(0, y.length - (y.length % m)); // groups that do not overlap start at one end
        expectEqual(of(whole.slice().reverse(), m)?.deviation, of(whole, m)?.deviation);
      }),
    );
  });

  test("a split adds no term across it and pools what each side gives alone", () => {
    fc.assert(
      fc.property(series, factor, fc.nat({ max: 80 }), (y, m, at) => {
        const sides = [y.subarray(0, Math.min(at, y.length)), y.subarray(Math.min(at, y.length))];
        const alone = sides.map((side) => of(side, m));
        const n = alone.reduce((sum, side) => sum + (side?.n ?? 0), 0);
        const both = deviation(statistic, sides, m);
        expect(both?.n ?? 0).toBe(n);
        expect(n).toBeLessThanOrEqual(of(y, m)?.n ?? 0);
        if (n === 0) return;
        const variance = alone.reduce((sum, side) => sum + (side ? side.n * side.deviation ** 2 : 0), 0) / n;
        expectEqual(both?.deviation, Math.sqrt(variance));
      }),
    );
  });

  test("a jump between two constant stretches is not seen", () => {
    const sides = [new Float64Array(20).fill(1), new Float64Array(20).fill(1000)];
    expect(deviation(statistic, sides, 3)?.deviation).toBe(0);
  });

  test("it counts the terms that the shape of the statistic promises", () => {
    fc.assert(
      fc.property(series, fc.integer({ min: 1, max: 30 }), (y, m) => {
        expect(of(y, m)?.n ?? 0).toBe(termsIn(statistic, y.length, m));
      }),
    );
  });

  test("too short a series has no deviation", () => {
    expect(of(Float64Array.of(1), 1)).toBeUndefined();
    expect(deviation(statistic, [], 1)).toBeUndefined();
  });

  test("an impossible averaging factor or value is an error", () => {
    const y = new Float64Array(12);
    for (const m of [0, 1.5, -1, NaN]) expect(() => of(y, m)).toThrow(RangeError);
    expect(() => of(y.with(5, NaN), 2)).toThrow(RangeError);
    expect(() => of(y.with(5, Infinity), 2)).toThrow(RangeError);
  });
});

/** NIST SP 1065 (2008): drift D per τ₀ gives D τ/√2 in the Allan statistics and nothing in the Hadamard ones. */
describe("a steady drift", () => {
  const y = Float64Array.from({ length: 400 }, (_, i) => 0.01 * i);

  test.each(["adev", "oadev", "mdev"] as const)("%s is D τ/√2", (statistic) => {
    for (const m of [1, 3, 32]) expect(deviation(statistic, [y], m)?.deviation).toBeCloseTo((0.01 * m) / Math.SQRT2, 9);
  });
  test.each(["hdev", "ohdev"] as const)("%s is nothing", (statistic) => {
    for (const m of [1, 3, 32]) expect(deviation(statistic, [y], m)?.deviation).toBeLessThan(1e-12);
  });
});

/** NIST SP 1065 (2008): sinusoidal modulation of peak A gives A sin²(πfτ)/(πfτ). */
test("a sine of long record", () => {
  const f = 1 / 200;
  // Values are averages over τ₀ of the sine.
  const omega = 2 * Math.PI * f;
  const y = Float64Array.from({ length: 200_000 }, (_, i) => (Math.cos(omega * i) - Math.cos(omega * (i + 1))) / omega);
  for (const m of [10, 60, 100]) {
    const x = Math.PI * f * m;
    expect(deviation("oadev", [y], m)?.deviation).toBeCloseTo(Math.sin(x) ** 2 / x, 4);
  }
});

test("a large common offset costs no more digits than the values have", () => {
  const y = Float64Array.from({ length: 1000 }, (_, i) => ((i * 7919) % 101) / 1024);
  const offset = y.map((one) => one + 2 ** 30);
  for (const statistic of statistics) {
    expect(deviation(statistic, [offset], 8)?.deviation).toBe(deviation(statistic, [y], 8)?.deviation);
  }
});
