import { describe, expect, it } from "vitest";
import { judgeGiven } from "@/lib/numerics/resonance/judge-given";

// f0 1 kHz, Q 100: half-width 5 Hz, ring-down time 100/(π·1000) s = 31.8 ms.
const given = { f0Hz: 1000, q: 100, f0StdHz: 0.01, qStd: 0.1 };
const asked = { startHz: 970, stopHz: 1030, points: 61, dwellS: 0.17 };

describe("values that a rig has fitted", () => {
  it("carry no flag from the middle of a good sweep, up or down, with standard errors or without", () => {
    expect(judgeGiven(given, asked)).toEqual([]);
    expect(judgeGiven(given, { ...asked, startHz: 1030, stopHz: 970 })).toEqual([]);
    expect(judgeGiven({ f0Hz: 1000, q: 100 }, asked)).toEqual([]);
  });

  it("edge: outside the middle 80 % of the sweep asked for", () => {
    expect(judgeGiven({ ...given, f0Hz: 976.1 }, asked)).toEqual([]);
    expect(judgeGiven({ ...given, f0Hz: 975.9 }, asked)).toEqual(["edge"]);
    expect(judgeGiven({ ...given, f0Hz: 1024.1 }, asked)).toEqual(["edge"]);
  });

  it("narrow, sparse and rushed as for a sweep", () => {
    expect(judgeGiven(given, { ...asked, startHz: 994, stopHz: 1006 })).toEqual(["narrow"]);
    expect(judgeGiven(given, { ...asked, points: 11 })).toEqual(["sparse"]);
    expect(judgeGiven(given, { ...asked, dwellS: 0.158 })).toEqual(["rushed"]);
  });

  it("failed: what is no f0, no Q or no standard error", () => {
    for (const bad of [{ f0Hz: NaN }, { f0Hz: -1 }, { q: Infinity }, { q: 0 }, { f0StdHz: -1 }, { qStd: Infinity }]) {
      expect(judgeGiven({ ...given, ...bad }, asked)).toEqual(["failed"]);
    }
  });
});
