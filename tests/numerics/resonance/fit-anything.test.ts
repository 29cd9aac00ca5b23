import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { fitRingDown } from "@/lib/numerics/resonance/fit-ring-down";
import type { ResonanceFit } from "@/lib/numerics/resonance/types";

/** Any finite numbers at all, among them zero, the smallest and the largest. */
const column = (n: number) =>
  fc.oneof(
    fc.array(fc.double({ noNaN: true, noDefaultInfinity: true }), { minLength: n, maxLength: n }),
    fc.array(fc.double({ min: -1, max: 1, noNaN: true }), { minLength: n, maxLength: n }),
    fc.double({ noNaN: true, noDefaultInfinity: true }).map((v) => new Array<number>(n).fill(v)),
    fc.array(fc.integer({ min: 0, max: 2 }), { minLength: n, maxLength: n }),
  ).map((values) => Float64Array.from(values));
const frequencies = (n: number) =>
  fc.oneof(
    fc.array(fc.double({ min: 1e-3, max: 1e9, noNaN: true }), { minLength: n, maxLength: n }),
    fc.array(fc.double({ min: Number.MIN_VALUE, max: Number.MAX_VALUE, noNaN: true }), { minLength: n, maxLength: n }),
    fc.constant(Array.from({ length: n }, (_, i) => 1000 + i)),
  ).map((values) => Float64Array.from(values));
const points = fc.integer({ min: 11, max: 60 });

function expectWhole(fit: ResonanceFit): void {
  const numbers = [fit.f0Hz, fit.q, fit.f0StdHz, fit.qStd, fit.amplitude, fit.noise, fit.covariance.f0q];
  if (fit.flags.includes("failed")) {
    expect(fit.flags).toEqual(["failed"]);
    expect(numbers).toEqual(new Array(7).fill(NaN));
  } else {
    expect(numbers.every(Number.isFinite), JSON.stringify(fit)).toBe(true);
    expect(fit.f0Hz).toBeGreaterThan(0);
    expect(fit.q).toBeGreaterThan(0);
  }
}

describe("whatever finite numbers come", () => {
  const readout = fc.constantFrom("velocity" as const, "displacement" as const);
  it("a complex sweep gives finite numbers or the flag failed", () => {
    fc.assert(fc.property(points.chain((n) => fc.tuple(frequencies(n), column(n), column(n))), readout, fc.boolean(), ([frequencyHz, re, im], r, offsetSlope) => {
      expectWhole(fitResonance({ kind: "complex", frequencyHz, re, im }, { readout: r, offsetSlope }));
    }), { numRuns: 500 });
  });
  it("a magnitude sweep too", () => {
    fc.assert(fc.property(points.chain((n) => fc.tuple(frequencies(n), column(n))), readout, fc.boolean(), ([frequencyHz, magnitude], r, offsetSlope) => {
      expectWhole(fitResonance({ kind: "magnitude", frequencyHz, magnitude }, { readout: r, offsetSlope }));
    }), { numRuns: 500 });
  });
  it("a ring-down too", () => {
    fc.assert(fc.property(points.chain(column), fc.double({ min: 1e-3, max: 1e9, noNaN: true }), (volts, sampleHz) => {
      expectWhole(fitRingDown({ sampleHz, startS: 0, volts }));
    }), { numRuns: 500 });
  });
});
