import { describe, expect, test } from "vitest";
import { judgeFit } from "@/lib/limits/fit";
import { judgePhase } from "@/lib/limits/judge";
import { judgeTemperature } from "@/lib/limits/temperature";
import { say, stateOf, worst, type Verdict } from "@/lib/limits/verdict";
import { factsOf, limitOf } from "./limit-facts";

describe("share of fits that cannot be used", () => {
  const limit = limitOf({ kind: "fit", sharePercent: 10 });

  test.each([
    [3, 20, "breach"],
    [2, 20, "between"],
    [9, 100, "between"],
    [8, 100, "inside"],
    [0, 20, "inside"],
    [1, 1, "breach"],
  ])("%d of %d against 10 %% is %s", (unusable, n, state) => {
    expect(judgeFit(limit, factsOf({ phase: { unusable, n } }))).toMatchObject({ state, value: (unusable / n) * 100, unit: "%" });
  });

  test("a phase without readings says nothing", () => {
    expect(judgeFit(limit, factsOf({ phase: { n: 0 } }))).toBeUndefined();
  });
});

describe("cell temperature", () => {
  const limit = limitOf({ kind: "temperature", minC: 4.95, maxC: 5.05 });

  test.each([
    [4.96, 5.04, "inside", 5.04, 5.05],
    [4.95, 5.05, "inside", 5.05, 5.05],
    [4.96, 5.08, "breach", 5.08, 5.05],
    [4.9, 5.0, "breach", 4.9, 4.95],
    [4.94, 5.2, "breach", 5.2, 5.05],
    [4.5, 5.06, "breach", 4.5, 4.95],
  ])("%d to %d °C is %s, with the reading farthest out", (minC, maxC, state, value, bound) => {
    expect(judgeTemperature(limit, factsOf({ phase: { minC, maxC } }))).toMatchObject({ state, value, limit: bound, unit: "°C" });
  });

  test("where the cell was not measured it says nothing", () => {
    expect(judgeTemperature(limit, factsOf({ phase: { minC: undefined, maxC: undefined } }))).toBeUndefined();
  });
});

describe("all limits of a protocol over one phase", () => {
  const limits = [
    limitOf({ kind: "return", id: "back", tolerancePpm: 60 }),
    limitOf({ kind: "fit", id: "fits", sharePercent: 10 }),
    limitOf({ kind: "silence", id: "quiet", afterS: 60 }),
    limitOf({ kind: "count", id: "tries", failedSteps: 3 }),
  ];

  test("each says what it has to say; silence and count are judged elsewhere", () => {
    expect(judgePhase(limits, factsOf({ ppm: 80 })).map(({ limitId, state }) => [limitId, state])).toEqual([
      ["back", "breach"],
      ["fits", "inside"],
    ]);
  });

  test("a limit on one medium leaves the others alone", () => {
    const inSample = [limitOf({ kind: "fit", sharePercent: 10, medium: "sample" })];
    expect(judgePhase(inSample, factsOf({ phase: { unusable: 20 } }))).toEqual([]);
    expect(judgePhase(inSample, factsOf({ phase: { medium: "sample", role: "sample", unusable: 20 } }))).toHaveLength(1);
  });

  test("minPhases keeps a limit quiet until so many are there", () => {
    const late = [limitOf({ kind: "return", tolerancePpm: 60, minPhases: 5 })];
    expect(judgePhase(late, factsOf({ ppm: 80, series: [0, 0, 0, 80] }))).toEqual([]);
    expect(judgePhase(late, factsOf({ ppm: 80, series: [0, 0, 0, 0, 80] }))).toHaveLength(1);
  });
});

describe("states and words", () => {
  test("the band from clearAt to the limit belongs to neither side", () => {
    expect([10.001, 10, 8.001, 8, 0].map((value) => stateOf(value, 10, 0.8))).toEqual(["breach", "between", "between", "inside", "inside"]);
  });

  test("of equal states the farther beyond its limit is the worse", () => {
    const verdict = (value: number, limit: number): Verdict => ({ limitId: "l", kind: "return", state: "breach", value, limit, unit: "ppm", text: "" });
    expect(worst([verdict(-70, 60), verdict(3, 2)])?.value).toBe(3);
    expect(worst([])).toBeUndefined();
  });

  test.each([
    [-72.04, "−72"],
    [0.012345, "0.0123"],
    [1234.5, "1235"],
    [0, "0"],
  ])("%d is said as %s", (value, text) => expect(say(value)).toBe(text));
});
