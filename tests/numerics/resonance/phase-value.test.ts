import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { phaseValue } from "@/lib/numerics/resonance/phase-value";
import { Dice, meanOf, rootMeanSquare } from "@/tests/numerics/resonance/sweeps";

/** First-order autoregressive values of unit variance. */
function autoregressive(n: number, r: number, dice: Dice): Float64Array {
  const values = new Float64Array(n);
  values[0] = dice.normal();
  for (let i = 1; i < n; i++) values[i] = r * values[i - 1] + Math.sqrt(1 - r * r) * dice.normal();
  return values;
}

describe("phase value", () => {
  it("no value: nothing known", () => {
    expect(phaseValue(new Float64Array(0))).toEqual({ n: 0, mean: NaN, sd: NaN, u: NaN, r1: 0 });
  });

  it("one value: the fit's standard error", () => {
    expect(phaseValue(Float64Array.of(440), { fitStd: 0.02 })).toEqual({ n: 1, mean: 440, sd: NaN, u: 0.02, r1: 0 });
    expect(phaseValue(Float64Array.of(440)).u).toBeNaN();
  });

  it("two values: r1 is 0, whatever earlier phases say", () => {
    const { mean, sd, u, r1 } = phaseValue(Float64Array.of(3, 5), { medianR1: 0.9 });
    expect([mean, r1]).toEqual([4, 0]);
    expect(sd).toBeCloseTo(Math.SQRT2, 12);
    expect(u).toBeCloseTo(1, 12);
  });

  it("by hand: 1 2 3 4 5 has r1 = 0.4", () => {
    // Deviations −2 −1 0 1 2: Σd² = 10, Σd(i)d(i+1) = 4; sd = √2.5; u = sd/√5·√(1.4/0.6).
    const { mean, sd, u, r1 } = phaseValue(Float64Array.of(1, 2, 3, 4, 5));
    expect(mean).toBe(3);
    expect(r1).toBeCloseTo(0.4, 12);
    expect(sd).toBeCloseTo(Math.sqrt(2.5), 12);
    expect(u).toBeCloseTo(Math.sqrt(0.5) * Math.sqrt(1.4 / 0.6), 12);
  });

  it("r1 below 0 counts as 0, and never exceeds 0.98", () => {
    expect(phaseValue(Float64Array.of(1, -1, 1, -1, 1, -1)).r1).toBe(0);
    expect(phaseValue(Float64Array.from({ length: 1000 }, (_, i) => i)).r1).toBe(0.98);
  });

  it("below 50 values r1 is at least the median of earlier phases, from 50 on its own", () => {
    const alternating = (n: number) => Float64Array.from({ length: n }, (_, i) => (i % 2 === 0 ? 1 : -1));
    expect(phaseValue(alternating(49), { medianR1: 0.6 }).r1).toBe(0.6);
    expect(phaseValue(alternating(50), { medianR1: 0.6 }).r1).toBe(0);
    expect(phaseValue(alternating(20), { medianR1: -0.3 }).r1).toBe(0);
    expect(phaseValue(alternating(20), { medianR1: 1 }).r1).toBe(0.98);
  });

  it("block means take over where values wander in pairs and fours", () => {
    // Sixteen values in eight equal pairs, pairs alternating: r1 = 1/16·…, the pairs' means scatter fully.
    const pairs = Float64Array.from({ length: 16 }, (_, i) => (Math.floor(i / 2) % 2 === 0 ? 1 : -1));
    const { u, sd, r1 } = phaseValue(pairs);
    const byLag = (sd / 4) * Math.sqrt((1 + r1) / (1 - r1));
    const byPairs = Math.sqrt(8 / 7) / Math.sqrt(8);
    expect(u).toBeCloseTo(byPairs, 12);
    expect(u).toBeGreaterThan(byLag);
  });

  it("fifteen values make seven pairs: too few blocks", () => {
    const pairs = Float64Array.from({ length: 15 }, (_, i) => (Math.floor(i / 2) % 2 === 0 ? 1 : -1));
    const { u, sd, r1 } = phaseValue(pairs);
    expect(u).toBeCloseTo((sd / Math.sqrt(15)) * Math.sqrt((1 + r1) / (1 - r1)), 12);
  });

  it("u covers the scatter of the mean for white and for slowly following values", () => {
    const dice = new Dice(31);
    for (const r of [0, 0.5, 0.9]) {
      const means: number[] = [];
      const us: number[] = [];
      for (let k = 0; k < 400; k++) {
        const { mean, u } = phaseValue(autoregressive(400, r, dice));
        means.push(mean);
        us.push(u);
      }
      // The largest of several estimates errs on the safe side: by up to half.
      const ratio = meanOf(us) / rootMeanSquare(means);
      expect(ratio).toBeGreaterThan(0.9);
      expect(ratio).toBeLessThan(1.5);
    }
  });

  it("a large common offset costs no digits", () => {
    const values = Float64Array.of(1, 2, 4, 3, 5, 4, 2, 6, 5, 7, 3, 4, 6, 5, 4, 7, 8);
    const near = phaseValue(values);
    const far = phaseValue(values.map((v) => v + 2 ** 30));
    expect(far.mean - 2 ** 30).toBeCloseTo(near.mean, 6);
    expect(Math.abs(far.u / near.u - 1)).toBeLessThan(1e-7);
  });

  it("shift and scale carry over", () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 3, maxLength: 80 }), fc.integer({ min: 1, max: 9 }), (list, factor) => {
        const one = phaseValue(Float64Array.from(list));
        const other = phaseValue(Float64Array.from(list, (v) => factor * v + 7));
        expect(other.mean).toBeCloseTo(factor * one.mean + 7, 6);
        expect(other.u).toBeCloseTo(factor * one.u, 6);
        expect(other.r1).toBeCloseTo(one.r1, 9);
      }),
      { seed: 13, numRuns: 200 },
    );
  });

  it("equal values have no uncertainty", () => {
    expect(phaseValue(new Float64Array(40).fill(5))).toEqual({ n: 40, mean: 5, sd: 0, u: 0, r1: 0 });
  });

  it("refuses what is not a number", () => {
    expect(() => phaseValue(Float64Array.of(1, NaN, 2))).toThrow(RangeError);
    expect(() => phaseValue(Float64Array.of(Infinity))).toThrow(RangeError);
    expect(() => phaseValue(Float64Array.of(1), { fitStd: -1 })).toThrow(RangeError);
    expect(() => phaseValue(Float64Array.of(1), { medianR1: 1.1 })).toThrow(RangeError);
  });
});
