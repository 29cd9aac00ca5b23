import { describe, expect, test } from "vitest";
import { coolingAfterDrying, type CoolingPhase } from "@/lib/numerics/drift/cooling";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";

const full = process.env.LONGREED_FULL === "1";
const spacingS = 20;

type Truth = { amplitude: number; tauS: number; perS?: number };

function phaseWith({ amplitude, tauS, perS = 0 }: Truth, noise: Float64Array, startS = 30): CoolingPhase {
  const sinceDryS = noise.map((_, i) => startS + spacingS * i);
  return { sinceDryS, values: sinceDryS.map((t, i) => 4000 + perS * t + amplitude * Math.exp(-t / tauS) + noise[i]) };
}

const runs = full ? 400 : 40;
const chance = (rate: number) => 3 * Math.sqrt((rate * (1 - rate)) / runs);

describe.each([0, -1] as const)("noise of exponent %i", (alpha) => {
  test("a return is found with its amplitude and time constant, as often within 1.96 u as stated", { timeout: 300_000 }, () => {
    const make = powerLawNoise({ alpha, length: 80, seed: 7 });
    const truth = { amplitude: 12, tauS: 240 };
    let amplitudes = 0;
    let taus = 0;
    let preferred = 0;
    for (let run = 0; run < runs; run++) {
      const found = coolingAfterDrying([phaseWith(truth, make()), phaseWith(truth, make())]);
      if (found?.preferred.startsWith("exponential")) preferred++;
      const { amplitude, amplitudeU, tauS, tauU } = found?.transient ?? missing();
      if (Math.abs(amplitude - truth.amplitude) < 1.96 * amplitudeU) amplitudes++;
      if (Math.abs(tauS - truth.tauS) < 1.96 * tauU) taus++;
    }
    expect(preferred / runs).toBeGreaterThan(0.97 - chance(0.97));
    expect(amplitudes / runs).toBeGreaterThan(0.92 - chance(0.92));
    expect(taus / runs).toBeGreaterThan(0.92 - chance(0.92));
  });

  test("noise alone and a drift alone are seldom taken for a return", { timeout: 300_000 }, () => {
    const make = powerLawNoise({ alpha, length: 60, seed: 8 });
    for (const perS of [0, 0.02]) {
      let wrong = 0;
      for (let run = 0; run < runs; run++) {
        if (coolingAfterDrying([phaseWith({ amplitude: 0, tauS: 1, perS }, make())])?.transient?.isSignificant) wrong++;
      }
      expect(wrong / runs, `drift of ${perS} per second`).toBeLessThan(0.06 + chance(0.06));
    }
  });
});

function missing(): never {
  throw new Error("no return was found");
}

test("a return on a drift is told from both", () => {
  const make = powerLawNoise({ alpha: 0, length: 200, seed: 9 });
  const truth = { amplitude: -15, tauS: 300, perS: 0.002 };
  const found = coolingAfterDrying(Array.from({ length: 4 }, () => phaseWith(truth, make())));
  expect(found?.preferred).toBe("exponential and line");
  expect(Math.abs((found?.line.perS ?? NaN) - 0.002)).toBeLessThan(3 * (found?.line.u ?? NaN));
  expect(found?.aiccDifferences["exponential and line"]).toBe(0);
  expect(found?.aiccDifferences.line).toBeGreaterThan(10);
});

test("a return too small for one phase shows in many together", () => {
  const make = powerLawNoise({ alpha: 0, length: 60, seed: 10 });
  const phases = Array.from({ length: 20 }, () => phaseWith({ amplitude: 2, tauS: 150 }, make()));
  expect(coolingAfterDrying(phases.slice(0, 1))?.transient?.isSignificant ?? false).toBe(false);
  expect(coolingAfterDrying(phases)).toMatchObject({ phases: 20, n: 1200, transient: { isSignificant: true } });
});

describe("repeats to leave out", () => {
  const make = powerLawNoise({ alpha: 0, length: 100, seed: 11 });
  const truth = { amplitude: 20, tauS: 120 };
  const phases = Array.from({ length: 4 }, () => phaseWith(truth, make()));

  test("as many as bring the mean of the others within the tolerance, and no more", () => {
    const { repeats = NaN, biasLeft, tolerance, waitS } = coolingAfterDrying(phases, { tolerance: 0.05 })?.discard ?? missing();
    const biasAfter = (discarded: number) => {
      let sum = 0;
      for (let i = discarded; i < 100; i++) sum += truth.amplitude * Math.exp(-(30 + spacingS * i) / truth.tauS);
      return sum / (100 - discarded);
    };
    expect(tolerance).toBe(0.05);
    expect(biasLeft).toBeLessThanOrEqual(0.05);
    expect(biasAfter(repeats)).toBeLessThan(0.06);
    expect(biasAfter(repeats - 2)).toBeGreaterThan(0.05);
    expect(waitS).toBeCloseTo(30 + repeats * spacingS, 9);
  });
  test("the tolerance is a third of the standard error unless given", () => {
    const { tolerance, repeats } = coolingAfterDrying(phases)?.discard ?? missing();
    expect(tolerance).toBeGreaterThan(0.8 / 30);
    expect(tolerance).toBeLessThan(1.2 / 30);
    expect(repeats).toBeGreaterThan(20);
  });
  test("where half the phase would not be enough, a longer wait is named instead", () => {
    const { repeats, waitS, biasLeft, tolerance } = coolingAfterDrying(phases, { tolerance: 1e-6 })?.discard ?? missing();
    expect(repeats).toBeUndefined();
    expect(biasLeft).toBeGreaterThan(tolerance);
    expect(waitS).toBeGreaterThan(1000);
  });
  test("none where nothing returns", () => {
    expect(coolingAfterDrying([phaseWith({ amplitude: 0, tauS: 1 }, make())])?.discard).toMatchObject({ repeats: 0, waitS: 0, biasLeft: 0 });
  });
});

test("too little, equal values and bad input", () => {
  const flat = { sinceDryS: Float64Array.from({ length: 40 }, (_, i) => i), values: new Float64Array(40).fill(3) };
  expect(coolingAfterDrying([])).toBeUndefined();
  expect(coolingAfterDrying([{ sinceDryS: Float64Array.of(1, 2, 3, 4), values: new Float64Array(4) }])).toBeUndefined();
  expect(coolingAfterDrying([flat])?.transient?.isSignificant ?? false).toBe(false);
  expect(() => coolingAfterDrying([{ ...flat, values: new Float64Array(39) }])).toThrow(RangeError);
  expect(() => coolingAfterDrying([{ ...flat, values: flat.values.with(3, NaN) }])).toThrow(RangeError);
  expect(() => coolingAfterDrying([{ ...flat, sinceDryS: new Float64Array(40) }])).toThrow(RangeError);
});
