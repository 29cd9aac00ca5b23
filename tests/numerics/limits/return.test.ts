import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { judgeReturn } from "@/lib/limits/return";
import { f0At, factsOf, limitOf } from "./limit-facts";

const limit = limitOf({ kind: "return", tolerancePpm: 60 });

describe("single references", () => {
  test.each([
    [61, "breach"],
    [-61, "breach"],
    [59, "between"],
    [-49, "between"],
    [47, "inside"],
    [0, "inside"],
  ])("%d ppm off the baseline is %s of 60 ppm with clearAt 0.8", (ppm, state) => {
    expect(judgeReturn(limit, factsOf({ ppm }))).toMatchObject({ state, limit: 60, unit: "ppm" });
  });

  test("the value is the deviation with its sign", () => {
    expect(judgeReturn(limit, factsOf({ ppm: -72 }))?.value).toBeCloseTo(-72, 6);
    expect(judgeReturn(limit, factsOf({ ppm: -72 }))?.text).toBe("air reference: f0 is −72 ppm from the baseline, limit ± 60 ppm");
  });

  test("clearAt 1 leaves nothing between", () => {
    const sharp = limitOf({ kind: "return", tolerancePpm: 60, clearAt: 1 });
    expect(judgeReturn(sharp, factsOf({ ppm: 59.9 }))?.state).toBe("inside");
  });

  test("Q is judged in per cent of the baseline", () => {
    const ofQ = limitOf({ kind: "return", toleranceQPercent: 2 });
    expect(judgeReturn(ofQ, factsOf({ q: 1800 * 0.97 }))).toMatchObject({ state: "breach", unit: "%", value: expect.closeTo(-3, 9) });
    expect(judgeReturn(ofQ, factsOf({ q: 1800 * 0.99 }))?.state).toBe("inside");
  });

  test("of two tolerances the worse verdict counts", () => {
    const both = limitOf({ kind: "return", tolerancePpm: 60, toleranceQPercent: 2 });
    expect(judgeReturn(both, factsOf({ ppm: 10, q: 1800 * 0.95 }))).toMatchObject({ state: "breach", unit: "%" });
    expect(judgeReturn(both, factsOf({ ppm: 200, q: 1800 }))).toMatchObject({ state: "breach", unit: "ppm" });
  });

  test.each([
    ["a liquid", { phase: { medium: "sample", role: "sample" as const } }],
    ["a check", { phase: { role: "check" as const } }],
    ["no complete baseline", { baseline: { f0Hz: 2400, q: 1800, complete: false } }],
    ["no baseline at all", { baseline: null }],
    ["a phase without a value", { phase: { f0Hz: undefined, q: undefined } }],
  ])("says nothing of %s", (_, given) => {
    expect(judgeReturn(limit, factsOf({ ppm: 500, ...given }))).toBeUndefined();
  });

  test("depends on the size of the deviation only", () => {
    fc.assert(
      fc.property(fc.double({ min: 0, max: 500, noNaN: true }), (ppm) => {
        expect(judgeReturn(limit, factsOf({ ppm }))?.state).toBe(judgeReturn(limit, factsOf({ ppm: -ppm }))?.state);
      }),
    );
  });
});

describe("steady movement, by the EWMA on ten references or more", () => {
  /** Scatter of about 1 ppm about a lasting shift of 5 ppm: no single value is near the limit. */
  const scatter = [0.5, -0.6, 0.4, -0.5, 0.6, -0.4, 0.5, -0.6, 0.4, -0.5, 0.6, -0.4];
  const shifted = (n: number) => scatter.slice(0, n).map((noise, i) => (i < 3 ? noise : noise + 5));

  test("ten references that have moved together are a breach far inside the tolerance", () => {
    const series = shifted(10);
    const verdict = judgeReturn(limit, factsOf({ ppm: series[9], series }));
    expect(verdict).toMatchObject({ state: "breach", value: expect.closeTo(4.5, 6) });
    expect(verdict?.text).toContain("steadily");
  });

  test("nine are too few to tell", () => {
    const series = shifted(9);
    expect(judgeReturn(limit, factsOf({ ppm: series[8], series }))?.state).toBe("inside");
  });

  test("scatter about the baseline is no movement", () => {
    expect(judgeReturn(limit, factsOf({ ppm: scatter[11], series: scatter }))?.state).toBe("inside");
  });

  test("equal values have no σ, and nothing is made of them", () => {
    const series = Array.from({ length: 12 }, () => 5);
    expect(judgeReturn(limit, factsOf({ ppm: 5, series }))?.state).toBe("inside");
  });

  test("it reads f0 and Q each against its own baseline", () => {
    const facts = factsOf({ ppm: 0, series: scatter, q: 1800 });
    facts.series.q = Float64Array.from(shifted(12), (shift) => 1800 * (1 + shift * 1e-6));
    expect(judgeReturn(limitOf({ kind: "return", toleranceQPercent: 1 }), facts)).toMatchObject({ state: "breach", unit: "%" });
    expect(judgeReturn(limit, { ...facts, phase: { ...facts.phase, f0Hz: f0At(0) } })?.state).toBe("inside");
  });
});
