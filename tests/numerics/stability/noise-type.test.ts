import { describe, expect, test } from "vitest";
import { identifyNoise } from "@/lib/numerics/stability/noise-type";
import reference from "@/tests/reference/1-frequency-stability/noise-identification.json";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";
import { lcgSeries } from "@/tests/numerics/stability/lcg-series";
import { relativeError } from "@/tests/numerics/relative-error";

/** Method of Riley and Greenhall (18th EFTF, 2004) on the 1000-point set of NIST SP 1065: white FM throughout. */
describe("1000-point set", () => {
  test.each(reference.computed_for_1000_point_series)("m = $averaging_factor", ({ averaging_factor, frequency_data }) => {
    const found = identifyNoise([lcgSeries()], averaging_factor);
    expect(found?.alpha).toBe(0);
    expect(found?.differences).toBe(frequency_data.differences);
    expect(relativeError(found?.r1, frequency_data.r1)).toBeLessThan(1e-6);
    expect(relativeError(found?.delta, frequency_data.delta)).toBeLessThan(1e-6);
  });
});

describe("known noise", () => {
  const told = (alpha: number, lowest?: -4) => {
    const make = powerLawNoise({ alpha, length: 256, seed: 19 });
    const found = Array.from({ length: 100 }, () => identifyNoise([make()], 2, lowest)?.alpha);
    return found.filter((one) => one === alpha).length;
  };

  test.each([
    { alpha: 2, least: 95 },
    { alpha: 0, least: 95 },
    { alpha: -1, least: 75 },
    { alpha: -2, least: 90 },
  ])("exponent $alpha is told in at least $least of 100 series of 128 averages", ({ alpha, least }) => {
    expect(told(alpha)).toBeGreaterThanOrEqual(least);
  });

  test("a random walk's running sum is random run noise for the Hadamard statistics, random walk for Allan's", () => {
    const make = powerLawNoise({ alpha: -2, length: 400, seed: 19 });
    let sum = 0;
    const run = make().map((value) => (sum += value));
    expect(identifyNoise([run], 1, -4)?.alpha).toBe(-4);
    expect(identifyNoise([run], 1)?.alpha).toBe(-2);
  });

  test("many short stretches count together, a stretch below thirty averages does not", () => {
    const make = powerLawNoise({ alpha: 0, length: 60, seed: 23 });
    const stretches = Array.from({ length: 20 }, make);
    expect(identifyNoise(stretches, 2)?.alpha).toBe(0);
    expect(identifyNoise([...stretches, Float64Array.from({ length: 59 }, (_, i) => i ** 3)], 2)).toEqual(
      identifyNoise(stretches, 2),
    );
    expect(identifyNoise(stretches, 3)).toBeUndefined();
  });

  test("nothing can be told from a constant", () => {
    expect(identifyNoise([new Float64Array(100).fill(2)], 1)).toBeUndefined();
  });
});
