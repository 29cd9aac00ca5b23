import { describe, expect, test } from "vitest";
import { noiseParts } from "@/lib/numerics/stability/noise-parts";
import { stabilityCurve } from "@/lib/numerics/stability/stability-curve";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";
import { relativeError } from "@/tests/numerics/relative-error";
import facts from "@/tests/reference/1-frequency-stability/power-law-facts.json";

const taus = Array.from({ length: 14 }, (_, i) => 30 * 2 ** i);
const pointsOf = (variance: (tauS: number) => number) =>
  taus.map((tauS) => ({ tauS, deviation: Math.sqrt(variance(tauS)), edf: 1e4 / tauS }));

/** IEEE Std 1139-2008: coefficients checked by numerical integration of the transfer function. */
test("the parts a curve was made of come back", () => {
  const { AVAR } = facts.coefficient_check;
  const [h0, h1, h2, drift] = [4e-12, 2e-15, 3e-19, 5e-13];
  const found = noiseParts(
    pointsOf((tauS) => (AVAR["0"] * h0) / tauS + AVAR["-1"] * h1 + AVAR["-2"] * h2 * tauS + (drift * tauS) ** 2 / 2),
  );
  expect(relativeError(found?.white, h0)).toBeLessThan(1e-6);
  expect(relativeError(found?.flicker, h1)).toBeLessThan(1e-5);
  expect(relativeError(found?.randomWalk, h2)).toBeLessThan(1e-5);
  expect(relativeError(found?.driftPerS, drift)).toBeLessThan(1e-5);
});

describe("averaging time of least deviation", () => {
  test("white noise and drift: where h₀/2τ falls as D²τ²/2 rises, τ³ = h₀/2D²", () => {
    const [h0, drift] = [2e-10, 1e-9];
    const found = noiseParts(pointsOf((tauS) => h0 / (2 * tauS) + (drift * tauS) ** 2 / 2));
    expect(relativeError(found?.best.tauS, Math.cbrt(h0 / (2 * drift ** 2)))).toBeLessThan(0.02);
    expect(found?.flicker).toBeCloseTo(0, 15);
  });
  test("white noise alone: the longest one", () => {
    expect(noiseParts(pointsOf((tauS) => 1e-10 / tauS))?.best.tauS).toBeCloseTo(taus[13], 6);
  });
});

test("simulated white noise is white", () => {
  const y = powerLawNoise({ alpha: 0, length: 4096, seed: 40 })();
  const curve = { stretches: [y], tau0S: 10, statistic: "oadev", taus: "octave", confidence: 0.683, minEdf: 5 } as const;
  const found = noiseParts(stabilityCurve(curve).points);
  expect(relativeError(found?.white, 20)).toBeLessThan(0.1); // unit variance: h₀ = 2 σ² τ₀
});

test("too little or impossible to fit", () => {
  expect(noiseParts([])).toBeUndefined();
  expect(noiseParts([{ tauS: 1, deviation: 1, edf: 5 }, { tauS: 2, deviation: 0, edf: 5 }])).toBeUndefined();
  expect(() => noiseParts([{ tauS: 0, deviation: 1, edf: 5 }])).toThrow(RangeError);
});
