import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { glsLine } from "@/lib/numerics/drift/gls-line";
import { powerLawVariogram } from "@/lib/numerics/drift/power-law-variogram";
import { lcgSeries } from "@/tests/numerics/stability/lcg-series";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";
import { relativeError } from "@/tests/numerics/relative-error";

/**
 * First 60 values of SP 1065 eq. (73) with four holes and uneven times, by an independent program that inverts the
 * covariance built from the unit steps.
 */
test("equals an independent computation on a series with holes", () => {
  const at = Float64Array.from([...Array(60).keys()].filter((i) => ![7, 8, 30, 45].includes(i)));
  const x = at.map((i) => 0.5 * i + 0.01 * Math.sin(i));
  const series = lcgSeries();
  const found = glsLine({ x, y: x.map((time, k) => series[at[k]] + 0.02 * time) });
  expect(relativeError(found?.slope, 0.025065735253615495)).toBeLessThan(1e-9);
  expect(relativeError(found?.u, 0.007264997666177232)).toBeLessThan(1e-9);
  expect(relativeError(found?.alpha, -0.19191000615999068)).toBeLessThan(1e-9);
  expect(relativeError(found?.lower, 0.010500291903962195)).toBeLessThan(1e-9);
  expect(relativeError(found?.intercept, 0.4288676813456944)).toBeLessThan(1e-9);
});

/** Hosking, Biometrika 68 (1981): white noise has V = 2σ² at every lag, random walk V = h. */
test("variogram of white noise and random walk", () => {
  expect([...powerLawVariogram(0, 4)]).toEqual([0, 1, 1, 1, 1]);
  expect([...powerLawVariogram(-2, 4)]).toEqual([0, 1, 2, 3, 4]);
  expect(() => powerLawVariogram(1, 4)).toThrow(RangeError);
});

const full = process.env.LONGREED_FULL === "1";

describe("95 % intervals cover the true slope in 92 to 99.7 % of series", () => {
  test.each([
    { alpha: 0, n: 50 },
    { alpha: -1, n: 50 },
    ...(full ? [0, -1].flatMap((alpha) => [100, 200, 500].map((n) => ({ alpha, n }))) : []),
  ])("exponent $alpha, N = $n", { timeout: 1_800_000 }, ({ alpha, n }) => {
    const runs = full && n <= 100 ? 1000 : 400;
    const make = powerLawNoise({ alpha, length: n, seed: 31 * n - alpha });
    const x = Float64Array.from({ length: n }, (_, i) => i / 4);
    let held = 0;
    let claimed = 0;
    let scattered = 0;
    for (let run = 0; run < runs; run++) {
      const noise = make();
      const { slope, u, lower, upper } = glsLine({ x, y: x.map((time, i) => 0.3 * time + noise[i]) }) ?? impossible();
      if (lower <= 0.3 && 0.3 <= upper) held++;
      claimed += u ** 2;
      scattered += (slope - 0.3) ** 2;
    }
    const chance = 300 * Math.sqrt((0.95 * 0.05) / runs); // three standard errors of the share
    expect((100 * held) / runs).toBeGreaterThan(92 - chance);
    expect((100 * held) / runs).toBeLessThan(99.7 + 300 * Math.sqrt((0.997 * 0.003) / runs));
    expect(Math.sqrt(claimed / scattered)).toBeLessThan(2.1); // what doubt about the noise may cost
  });
});

/** White noise on a random walk: no exponent stands for it. Without its own kinds, 95 % intervals would cover half of it. */
describe("white noise on a random walk, N = 100", () => {
  test.each([0.1, 0.2])("steps of %f", { timeout: 1_800_000 }, (walk) => {
    const runs = full ? 600 : 100;
    const n = 100;
    const [white, steps] = [0, -2].map((alpha) => powerLawNoise({ alpha, length: n, seed: 40 - alpha }));
    const x = Float64Array.from({ length: n }, (_, i) => i);
    let held = 0;
    for (let run = 0; run < runs; run++) {
      const walked = steps();
      const { lower, upper } = glsLine({ x, y: white().map((value, i) => value + walk * walked[i]) }) ?? impossible();
      if (lower <= 0 && upper >= 0) held++;
    }
    expect((100 * held) / runs).toBeGreaterThan(72 - 300 * Math.sqrt((0.72 * 0.28) / runs));
  });
});

function impossible(): never {
  throw new Error("a line of fifty values has a slope");
}

test("white noise and random walk are told apart by the mean exponent", () => {
  const x = Float64Array.from({ length: 200 }, (_, i) => i);
  expect(glsLine({ x, y: powerLawNoise({ alpha: 0, length: 200, seed: 3 })() })?.alpha).toBeGreaterThan(-0.4);
  expect(glsLine({ x, y: powerLawNoise({ alpha: -2, length: 200, seed: 3 })() })?.alpha).toBeLessThan(-1.4);
});

test("under random walk the uncertainty is far above that of an ordinary line", () => {
  const x = Float64Array.from({ length: 100 }, (_, i) => i);
  const y = powerLawNoise({ alpha: -2, length: 100, seed: 8 })();
  expect(glsLine({ x, y })?.u).toBeGreaterThan(0.05); // a random walk of unit steps: 1/√99
});

test("an exact line has its slope and no uncertainty to speak of", () => {
  const x = Float64Array.of(0, 1, 2, 4, 7);
  const found = glsLine({ x, y: x.map((time) => 5 - 2 * time) });
  expect(found).toMatchObject({ slope: -2, u: 0, lower: -2, upper: -2, intercept: 5 });
});

test("more than 300 values are taken as block means, said so", () => {
  const n = 700;
  const x = Float64Array.from({ length: n }, (_, i) => i);
  const noise = powerLawNoise({ alpha: 0, length: n, seed: 21 })();
  const found = glsLine({ x, y: x.map((time, i) => 0.01 * time + noise[i]) });
  expect(found).toMatchObject({ blockLength: 3, n: 234 });
  expect(Math.abs((found?.slope ?? NaN) - 0.01)).toBeLessThan(3 * (found?.u ?? NaN));
});

test("shift and scale of values and time pass through to the slope", () => {
  const y = lcgSeries().subarray(0, 40);
  const x = Float64Array.from(y, (_, i) => i);
  const plain = glsLine({ x, y });
  fc.assert(
    fc.property(fc.double({ min: -100, max: 100, noNaN: true }), fc.double({ min: 0.01, max: 100, noNaN: true }), (shift, scale) => {
      const moved = glsLine({ x: x.map((time) => time * scale), y: y.map((value) => value * 3 + shift) });
      expect(relativeError(moved?.slope, (3 * (plain?.slope ?? NaN)) / scale)).toBeLessThan(1e-8);
      expect(relativeError(moved?.u, (3 * (plain?.u ?? NaN)) / scale)).toBeLessThan(1e-8);
    }),
    { numRuns: 20 },
  );
});

test("too few values, times that do not rise, values that are not finite", () => {
  expect(glsLine({ x: Float64Array.of(0, 1), y: Float64Array.of(0, 1) })).toBeUndefined();
  expect(() => glsLine({ x: Float64Array.of(0, 1, 1), y: Float64Array.of(0, 1, 2) })).toThrow(RangeError);
  expect(() => glsLine({ x: Float64Array.of(0, 1, 2), y: Float64Array.of(0, NaN, 2) })).toThrow(RangeError);
  expect(() => glsLine({ x: Float64Array.of(0, 1, 2), y: Float64Array.of(0, 1) })).toThrow(RangeError);
  expect(() => glsLine({ x: Float64Array.of(0, 1, 2, 1e8), y: Float64Array.of(0, 1, 0, 1) })).toThrow(/too long/);
});
