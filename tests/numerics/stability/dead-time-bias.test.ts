import { describe, expect, test } from "vitest";
import { deadTimeBias } from "@/lib/numerics/stability/dead-time-bias";
import { relativeError } from "@/tests/numerics/relative-error";

/** Special values of B₂ in NIST TN 1318 (1990): 2/3 in phase noise, 1 in white FM, (3r − 1)/2 in random walk FM. */
describe("B₂ in closed form", () => {
  test.each([1.01, 1.5, 2, 8])("r = %f", (r) => {
    expect(deadTimeBias({ alpha: 2, r, m: 1 }).b2).toBeCloseTo(2 / 3, 12);
    expect(deadTimeBias({ alpha: 1, r, m: 1 }).b2).toBeCloseTo(2 / 3, 12);
    expect(deadTimeBias({ alpha: 0, r, m: 1 }).b2).toBeCloseTo(1, 12);
    expect(deadTimeBias({ alpha: -2, r, m: 1 }).b2).toBeCloseTo((3 * r - 1) / 2, 10);
    const flicker = (-2 * r ** 2 * Math.log(r) + (r + 1) ** 2 * Math.log(r + 1) + (r - 1) ** 2 * Math.log(r - 1)) / (4 * Math.LN2);
    expect(deadTimeBias({ alpha: -1, r, m: 1 }).b2).toBeCloseTo(flicker, 10);
  });
});

test("no dead time, no bias, at any averaging factor", () => {
  for (const alpha of [2, 0, -1, -2] as const) {
    for (const m of [1, 2, 7, 40]) {
      const { b2, b3 } = deadTimeBias({ alpha, r: 1, m });
      expect(relativeError(b2, 1)).toBeLessThan(1e-9);
      expect(relativeError(b3, 1)).toBeLessThan(1e-9);
    }
  }
});

test("white FM has none at any dead time", () => {
  for (const m of [1, 3, 20]) expect(deadTimeBias({ alpha: 0, r: 3.7, m }).variance).toBeCloseTo(1, 10);
});

/** Directly from the covariance of averages under a generalised covariance −|t|^(μ+2) of the running integral. */
test.each([
  { alpha: -2, mu: 1 },
  { alpha: 0, mu: -1 },
] as const)("equals the variance of every pair of repeats summed, α = $alpha", ({ alpha, mu }) => {
  const [m, r] = [5, 1.8];
  const covariance = (lag: number) =>
    (Math.abs(lag + 1) ** (mu + 2) + Math.abs(lag - 1) ** (mu + 2) - 2 * Math.abs(lag) ** (mu + 2)) / 2;
  const varianceOf = (starts: number[], weights: number[]) =>
    starts.reduce((sum, a, i) => sum + starts.reduce((inner, b, j) => inner + weights[i] * weights[j] * covariance(a - b), 0), 0);
  const weights = Array.from({ length: 2 * m }, (_, i) => (i < m ? -1 / m : 1 / m));
  const withDeadTime = varianceOf(weights.map((_, i) => i * r), weights);
  const without = varianceOf(weights.map((_, i) => i), weights);
  // The same number of repeats without dead time spans τ = m τ₀, as B₂ B₃ compare.
  const { variance } = deadTimeBias({ alpha, r, m });
  expect(relativeError(variance * without, withDeadTime)).toBeLessThan(1e-9);
});

test("impossible ratios, factors and noise are errors", () => {
  expect(() => deadTimeBias({ alpha: 0, r: 0.9, m: 1 })).toThrow(RangeError);
  expect(() => deadTimeBias({ alpha: 0, r: 2, m: 0 })).toThrow(RangeError);
  expect(() => deadTimeBias({ alpha: -3, r: 2, m: 1 })).toThrow(RangeError);
});
