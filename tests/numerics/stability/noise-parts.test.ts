import { describe, expect, test } from "vitest";
import { allanCorrelation } from "@/lib/numerics/stability/allan-correlation";
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

describe("uncertainties are those of the scatter over many series", () => {
  const full = process.env.LONGREED_FULL === "1";
  const runs = full ? 300 : 100;
  const length = 512;
  const partsOf = (y: Float64Array) => {
    const curve = { stretches: [y], tau0S: 10, statistic: "oadev", taus: "octave", confidence: 0.683, minEdf: 3 } as const;
    const found = noiseParts(stabilityCurve(curve).points);
    if (!found) throw new Error("no parts");
    return found;
  };

  test.each([
    { name: "white" as const, alpha: 0 as const },
    { name: "flicker" as const, alpha: -1 as const },
    { name: "randomWalk" as const, alpha: -2 as const },
  ])("$name", { timeout: 300_000 }, ({ name, alpha }) => {
    const make = powerLawNoise({ alpha, length, seed: 61 - alpha });
    const found = Array.from({ length: runs }, () => partsOf(make()));
    const mean = found.reduce((sum, one) => sum + one[name], 0) / runs;
    const scatter = Math.sqrt(found.reduce((sum, one) => sum + (one[name] - mean) ** 2, 0) / runs);
    const stated = Math.sqrt(found.reduce((sum, one) => sum + one.u[name] ** 2, 0) / runs);
    expect(stated / scatter).toBeGreaterThan(0.6); // which parts are let in is not in it
    expect(stated / scatter).toBeLessThan(1.6);
    const held = found.filter((one) => Math.abs(one[name] - mean) < 2 * one.u[name]).length / runs;
    expect(held).toBeGreaterThan(0.85);
  });

  test("a part that is not there is at most a few uncertainties large", () => {
    const make = powerLawNoise({ alpha: 0, length, seed: 5 });
    const far = Array.from({ length: runs }, () => partsOf(make())).filter(({ randomWalk, u }) => randomWalk > 3 * u.randomWalk);
    expect(far.length / runs).toBeLessThan(0.1);
  });
});

/** White noise: second differences of span τ and 2τ of a Wiener phase; R by integrating their piecewise linear covariances. */
test("correlation of neighbouring octaves", () => {
  const white = allanCorrelation([1, 2, 1000], { white: 1, flicker: 0, randomWalk: 0 });
  const covariance = (lag: number, a: number, b: number) =>
    [1, -2, 1].reduce((sum, v, i) => sum + [1, -2, 1].reduce((inner, w, j) => inner - v * w * Math.abs(lag + (j - 1) * b - (i - 1) * a), 0), 0);
  const integral = (a: number, b: number) => {
    let sum = 0;
    for (let k = -40_000; k < 40_000; k++) sum += covariance((k + 0.5) * 1e-4, a, b) ** 2 * 1e-4;
    return sum;
  };
  expect(relativeError(white[1], integral(1, 2) / Math.sqrt(integral(1, 1) * integral(2, 2)))).toBeLessThan(0.01);
  expect(white[1]).toBe(white[3]);
  expect([white[0], white[4], white[2]]).toEqual([1, 1, 0]);
});

test("times as good as the best are named", () => {
  const { best } = noiseParts(pointsOf((tauS) => 1e-10 / tauS + 1e-13)) ?? {};
  expect(best?.toS).toBeCloseTo(taus[13], 6);
  expect(best?.fromS).toBeLessThan(taus[13] / 1.5);
});

test("too little or impossible to fit", () => {
  expect(noiseParts([])).toBeUndefined();
  expect(noiseParts([{ tauS: 1, deviation: 1, edf: 5 }, { tauS: 2, deviation: 0, edf: 5 }])).toBeUndefined();
  expect(() => noiseParts([{ tauS: 0, deviation: 1, edf: 5 }])).toThrow(RangeError);
});
