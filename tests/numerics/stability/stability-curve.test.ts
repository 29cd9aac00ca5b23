import { describe, expect, test } from "vitest";
import { averagingFactors } from "@/lib/numerics/stability/averaging-factors";
import { deviation } from "@/lib/numerics/stability/deviation";
import { stabilityCurve } from "@/lib/numerics/stability/stability-curve";
import { stretches } from "@/lib/numerics/stability/stretches";
import { lcgSeries } from "@/tests/numerics/stability/lcg-series";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";

const curve = (series: Float64Array[], more: Partial<Parameters<typeof stabilityCurve>[0]> = {}) =>
  stabilityCurve({ stretches: series, tau0S: 60, statistic: "oadev", taus: "octave", confidence: 0.683, ...more }).points;

describe("averaging factors", () => {
  test("octaves, decades and all end at half the longest stretch", () => {
    expect(averagingFactors("octave", 17)).toEqual([1, 2, 4, 8]);
    expect(averagingFactors("decade", 100)).toEqual([1, 2, 4, 10, 20, 40]);
    expect(averagingFactors("all", 9)).toEqual([1, 2, 3, 4]);
    for (const taus of ["octave", "decade", "all"] as const) expect(averagingFactors(taus, 1)).toEqual([]);
  });
  test("all of a long series are thinned to rising whole numbers, at most 2 000, both ends kept", () => {
    const factors = averagingFactors("all", 1_000_000);
    expect(factors.length).toBeLessThanOrEqual(2000);
    expect(factors.length).toBeGreaterThan(1000);
    expect(factors[0]).toBe(1);
    expect(factors.at(-1)).toBe(500_000);
    expect(factors.every((m, i) => Number.isInteger(m) && (i === 0 || m > factors[i - 1]))).toBe(true);
  });
  test("an impossible length is an error", () => expect(() => averagingFactors("all", -1)).toThrow(RangeError));
});

describe("stretches", () => {
  const atS = Float64Array.of(0, 10, 20, 36, 46, 56, 66);
  const y = Float64Array.of(1, 2, 3, 4, 5, 6, 7);

  test("a spacing over 1.5 τ₀ ends a stretch", () => {
    const found = stretches({ atS, y });
    expect(found.tau0S).toBe(10);
    expect(found.stretches.map((one) => [...one])).toEqual([[1, 2, 3], [4, 5, 6, 7]]);
    expect([...found.startsS]).toEqual([0, 36]);
  });
  test("a spacing of exactly 1.5 τ₀ does not", () => {
    expect(stretches({ atS: Float64Array.of(0, 10, 20, 35, 45), y: y.subarray(0, 5) }).stretches).toHaveLength(1);
  });
  test("a reading left out ends a stretch, whatever its value", () => {
    const leftOut = Uint8Array.of(0, 1, 0, 0, 0, 0, 1);
    const found = stretches({ atS, y: y.with(1, NaN), leftOut });
    expect(found.stretches.map((one) => [...one])).toEqual([[1], [3], [4, 5, 6]]);
    expect([...found.startsS]).toEqual([0, 20, 36]);
  });
  test("no readings, one reading, none that counts", () => {
    expect(stretches({ atS: new Float64Array(0), y: new Float64Array(0) }).stretches).toEqual([]);
    const one = stretches({ atS: Float64Array.of(5), y: Float64Array.of(1) });
    expect(one.tau0S).toBeNaN();
    expect(one.stretches).toHaveLength(1);
    expect(stretches({ atS, y, leftOut: new Uint8Array(7).fill(1) }).stretches).toEqual([]);
  });
  test("falling times, unequal lengths and a value that is not finite are errors", () => {
    expect(() => stretches({ atS: atS.slice().reverse(), y })).toThrow(RangeError);
    expect(() => stretches({ atS, y: y.subarray(1) })).toThrow(RangeError);
    expect(() => stretches({ atS, y: y.with(3, NaN) })).toThrow(/value 3/);
    expect(() => stretches({ atS: new Float64Array(7), y })).toThrow(RangeError);
  });
});

describe("curve", () => {
  test("white FM of SP 1065's 1000-point set", () => {
    const points = curve([lcgSeries()], { taus: "decade" });
    expect(points.map(({ m }) => m)).toEqual([1, 2, 4, 10, 20, 40, 100, 200, 400]);
    const ten = points[3];
    expect(ten).toMatchObject({ tauS: 600, n: 981, noise: "white FM" });
    expect(ten.noiseMarked).toBeUndefined();
    expect(ten.deviation).toBeCloseTo(0.09159953, 7); // Table 31
    expect(ten.edf).toBeCloseTo(146.07233, 4); // exact; simple formula of Table 5: 146.177
    expect(ten.lower).toBeLessThan(ten.deviation);
    expect(ten.upper).toBeGreaterThan(ten.deviation);
  });

  test("beyond thirty averages the noise of the largest factor that has one is taken, and marked", () => {
    const points = curve([lcgSeries()]);
    expect(points.filter(({ noiseMarked }) => !noiseMarked).map(({ m }) => m)).toEqual([1, 2, 4, 8, 16, 32]);
    for (const { m, noise, noiseMarked } of points.filter(({ m }) => m > 33)) {
      expect({ m, noise, noiseMarked }).toEqual({ m, noise: points[5].noise, noiseMarked: "from the largest factor that has one" });
    }
  });

  test("below thirty values white FM is assumed, and marked", () => {
    for (const { noise, noiseMarked } of curve([lcgSeries().subarray(0, 29), lcgSeries().subarray(40, 60)])) {
      expect({ noise, noiseMarked }).toEqual({ noise: "white FM", noiseMarked: "assumed" });
    }
  });

  test.each([
    [2, "white PM"],
    [0, "white FM"],
    [-1, "flicker FM"],
    [-2, "random walk FM"],
  ] as const)("noise of exponent %i over forty stretches is told as %s", (alpha, noise) => {
    const make = powerLawNoise({ alpha, length: 120, seed: 77 });
    const points = curve(Array.from({ length: 40 }, make));
    expect(points.filter(({ noiseMarked }) => !noiseMarked).map((point) => point.noise)).toEqual([noise, noise, noise]);
  });

  test("the slope of the curve is that of the noise", () => {
    for (const [alpha, slope] of [[2, -1], [0, -0.5], [-1, 0], [-2, 0.5]]) {
      const make = powerLawNoise({ alpha, length: 200, seed: 5 });
      const points = curve(Array.from({ length: 50 }, make));
      const [short, long] = [points[2], points[4]]; // m = 4 and 16
      expect(Math.abs(Math.log(long.deviation / short.deviation) / Math.log(4) - slope)).toBeLessThan(0.1);
    }
  });

  test("time deviation comes out in unit times seconds", () => {
    const [first] = curve([lcgSeries()], { statistic: "tdev" });
    expect(first.deviation).toBeCloseTo(0.1687202 * 60, 4); // SP 1065 Table 31, τ₀ = 60 s
  });

  test("total deviation is freed of its bias in random walk noise", () => {
    const make = powerLawNoise({ alpha: -2, length: 128, seed: 11 });
    const series = Array.from({ length: 300 }, make);
    const total = curve(series, { statistic: "totdev" }).at(-2);
    const allan = curve(series).at(-2);
    expect(Math.abs((total?.deviation ?? NaN) / (allan?.deviation ?? NaN) - 1)).toBeLessThan(0.05);
    expect((deviation("totdev", series, 32)?.deviation ?? NaN) / (allan?.deviation ?? NaN)).toBeLessThan(0.95);
  });

  test("points below the least degrees of freedom are left out", () => {
    const all = curve([lcgSeries()]);
    const kept = curve([lcgSeries()], { minEdf: 5 });
    expect(kept.length).toBeLessThan(all.length);
    expect(kept).toEqual(all.filter(({ edf }) => edf >= 5));
  });

  test("nothing to draw from stretches of one value", () => {
    expect(curve([Float64Array.of(1), Float64Array.of(2)])).toEqual([]);
    expect(curve([])).toEqual([]);
  });

  test("a constant series has no deviation and no width", () => {
    for (const point of curve([new Float64Array(64).fill(3)])) expect(point).toMatchObject({ deviation: 0, lower: 0, upper: 0 });
  });
});
