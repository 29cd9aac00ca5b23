import { describe, expect, test } from "vitest";
import { findSteps } from "@/lib/numerics/drift/steps";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";
import { gaussian } from "@/tests/numerics/seeded-noise";

const times = (n: number) => Float64Array.from({ length: n }, (_, i) => i / 2);

describe("known steps on a drift in white noise", () => {
  const next = gaussian(99);
  const x = times(120);
  const y = x.map((time, i) => 500 + 0.3 * time + (i >= 40 ? 8 : 0) - (i >= 90 ? 6 : 0) + next());
  const found = findSteps({ x, y });

  test("are found at their time with their size", () => {
    expect(found.map(({ index }) => index)).toEqual([40, 90]);
    expect(found.map(({ at }) => at)).toEqual([20, 45]);
    expect(Math.abs(found[0].size - 8)).toBeLessThan(3 * found[0].u);
    expect(Math.abs(found[1].size + 6)).toBeLessThan(3 * found[1].u);
  });
  test("with an uncertainty near that of the scatter", () => {
    for (const { u } of found) {
      expect(u).toBeGreaterThan(0.15);
      expect(u).toBeLessThan(0.8);
    }
  });
  test("a common shift moves nothing", () => {
    expect(findSteps({ x, y: y.map((value) => value + 1000) }).map(({ index }) => index)).toEqual([40, 90]);
  });
});

test("the stated uncertainty of a step is that of its scatter", () => {
  const next = gaussian(5);
  const x = times(60);
  let squares = 0;
  let stated = 0;
  for (let run = 0; run < 60; run++) {
    const step = findSteps({ x, y: x.map((_, i) => (i >= 30 ? 10 : 0) + next()) }).find(({ index }) => index === 30);
    squares += ((step?.size ?? NaN) - 10) ** 2;
    stated += (step?.u ?? NaN) ** 2;
  }
  expect(Math.sqrt(stated / squares)).toBeGreaterThan(0.8);
  expect(Math.sqrt(stated / squares)).toBeLessThan(1.7);
});

const full = process.env.LONGREED_FULL === "1";
const runs = full ? 600 : 60;
const chance = (rate: number) => 3 * Math.sqrt((rate * (1 - rate)) / runs);

describe.each([
  { alpha: 0, falseRate: 0.01, missedRate: 0.01 },
  { alpha: -0.5, falseRate: 0.03, missedRate: 0.01 },
  { alpha: -1, falseRate: 0.06, missedRate: 0.03 },
  { alpha: -2, falseRate: 0.05, missedRate: 0.08 },
])("sixty values under noise of exponent $alpha", ({ alpha, falseRate, missedRate }) => {
  const x = times(60);

  test(`a drift is cut into stairs in at most ${100 * falseRate} % of series`, { timeout: 300_000 }, () => {
    const make = powerLawNoise({ alpha, length: 60, seed: 61 });
    let wrong = 0;
    for (let run = 0; run < runs; run++) {
      const noise = make();
      if (findSteps({ x, y: x.map((time, i) => 2 * time + noise[i]) }).length > 0) wrong++;
    }
    expect(wrong / runs).toBeLessThanOrEqual(falseRate + chance(falseRate));
  });

  test(`a step of six is missed in at most ${100 * missedRate} % of series`, { timeout: 300_000 }, () => {
    const make = powerLawNoise({ alpha, length: 60, seed: 62 });
    let missed = 0;
    for (let run = 0; run < runs; run++) {
      const y = make().map((value, i) => value + (i >= 20 ? 6 : 0));
      if (!findSteps({ x, y }).some(({ index }) => Math.abs(index - 20) <= 1)) missed++;
    }
    expect(missed / runs).toBeLessThanOrEqual(missedRate + chance(missedRate));
  });
});

test("a single wild value is no step", () => {
  const next = gaussian(23);
  const x = times(60);
  const y = x.map(() => next()).with(30, 60);
  expect(findSteps({ x, y })).toEqual([]);
});

test("too few values, values without scatter, bad input", () => {
  expect(findSteps({ x: times(7), y: Float64Array.of(0, 1, 0, 9, 8, 9, 8) })).toEqual([]);
  expect(findSteps({ x: times(20), y: new Float64Array(20).fill(3) })).toEqual([]);
  expect(findSteps({ x: new Float64Array(0), y: new Float64Array(0) })).toEqual([]);
  expect(() => findSteps({ x: times(20), y: new Float64Array(19) })).toThrow(RangeError);
  expect(() => findSteps({ x: times(20), y: new Float64Array(20).fill(NaN) })).toThrow(RangeError);
});

test("a step without any scatter is found exactly", () => {
  const found = findSteps({ x: times(20), y: Float64Array.from({ length: 20 }, (_, i) => (i < 8 ? 4 : 7)) });
  expect(found).toHaveLength(1);
  expect(found[0]).toMatchObject({ index: 8, at: 4 });
  expect(found[0].size).toBeCloseTo(3, 9);
  expect(found[0].u).toBeLessThan(1e-6);
});

test("more than 300 values are taken as blocks, the time is that of the block", () => {
  const next = gaussian(31);
  const x = times(450);
  const found = findSteps({ x, y: x.map((_, i) => (i >= 200 ? 5 : 0) + next()) });
  expect(found).toHaveLength(1);
  expect(Math.abs(found[0].at - 100)).toBeLessThanOrEqual(1);
});
