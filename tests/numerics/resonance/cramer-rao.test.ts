import { describe, expect, it } from "vitest";
import { cramerRaoBound } from "@/lib/numerics/resonance/cramer-rao";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { Dice, meanOf, noisySweep, rootMeanSquare } from "@/tests/numerics/resonance/sweeps";
import reference from "@/tests/reference/4-resonator-physics/cramer-rao-bound.json";

// Source of every number: tests/reference/4-resonator-physics/cramer-rao-bound.json (Fisher information in white Gaussian noise,
// Kay 1993). Its exact oscillator z = A(i/Q)/(1 − (f/f0)² + if/(Qf0)) is our displacement readout with a = iA: |a| = |A|.
const BOUND_TOLERANCE = 1e-4; // "numeric bound relative 1e-4 (N-point sums)"

describe("Cramér–Rao bound against the published cases", () => {
  for (const [i, c] of reference.cases.entries()) {
    const input = {
      frequencyHz: linearGrid(c.first_f, c.last_f, c.N),
      readout: "displacement" as const,
      f0Hz: c.f0,
      q: c.Q,
      a: { re: 0, im: 1 },
      noise: c.sigma_per_quadrature,
    };
    it(`case ${i}: f0 ${c.f0} Hz, Q ${c.Q}, ${c.N} points, no offset`, () => {
      const bound = cramerRaoBound({ ...input, offset: "none" });
      const published = c.exact_oscillator_4_parameters;
      expect(Math.abs(bound.f0StdHz / published.sigma_f0 - 1)).toBeLessThan(BOUND_TOLERANCE);
      expect(Math.abs(bound.qStd / published.sigma_Q - 1)).toBeLessThan(BOUND_TOLERANCE);
      expect(Math.abs(bound.correlation - published.corr_f0_Q)).toBeLessThan(1e-6);
    });
    it(`case ${i}: with a constant offset`, () => {
      const bound = cramerRaoBound({ ...input, offset: "constant" });
      const published = c.exact_oscillator_plus_complex_background_6_parameters;
      expect(Math.abs(bound.f0StdHz / published.sigma_f0 - 1)).toBeLessThan(BOUND_TOLERANCE);
      expect(Math.abs(bound.qStd / published.sigma_Q - 1)).toBeLessThan(BOUND_TOLERANCE);
    });
    it(`case ${i}: 1 500 fits scatter as the bound says, without bias`, () => {
      const dice = new Dice(1000 + i);
      const published = c.exact_oscillator_plus_complex_background_6_parameters;
      const f0Errors: number[] = [];
      const qErrors: number[] = [];
      for (let k = 0; k < 1500; k++) {
        const parameters = { readout: input.readout, f0Hz: c.f0, q: c.Q, a: input.a, b: dice.phasor(30) };
        const fit = fitResonance(noisySweep(input.frequencyHz, parameters, input.noise, dice), { readout: input.readout, offsetSlope: false });
        f0Errors.push((fit.f0Hz - c.f0) / published.sigma_f0);
        qErrors.push((fit.q - c.Q) / published.sigma_Q);
      }
      for (const errors of [f0Errors, qErrors]) {
        // "scatter divided by the bound lies in 0.93 to 1.07 and its bias is below 3 standard errors"
        expect(rootMeanSquare(errors)).toBeGreaterThan(0.93);
        expect(rootMeanSquare(errors)).toBeLessThan(1.07);
        expect(Math.abs(meanOf(errors))).toBeLessThan(3 / Math.sqrt(1500));
      }
    });
  }

  it("what a fit states is this bound at its own f0, Q, a and noise: the projection loses nothing", () => {
    const dice = new Dice(9);
    for (const readout of ["velocity", "displacement"] as const) {
      for (const q of [4, 30, 3000]) {
        const frequencyHz = linearGrid(1000 - (0.9 * 3000) / (2 * q), 1000 + (0.9 * 2500) / (2 * q), 201);
        const fit = fitResonance(noisySweep(frequencyHz, { readout, f0Hz: 1000, q, a: dice.phasor(1), b: dice.phasor(9) }, 0.01, dice), { readout });
        const bound = cramerRaoBound({ frequencyHz, readout, f0Hz: fit.f0Hz, q: fit.q, a: fit.a, noise: fit.noise });
        expect(Math.abs(fit.f0StdHz / bound.f0StdHz - 1)).toBeLessThan(1e-4);
        expect(Math.abs(fit.qStd / bound.qStd - 1)).toBeLessThan(1e-4);
        expect(fit.covariance.f0q / (fit.f0StdHz * fit.qStd)).toBeCloseTo(bound.correlation, 4);
        expect(fit.covariance.f0f0).toBeCloseTo(fit.f0StdHz ** 2, 12);
      }
    }
  });

  it("a slope in the offset costs more than a constant one", () => {
    const input = { frequencyHz: linearGrid(980, 1020, 201), readout: "velocity" as const, f0Hz: 1003, q: 100, a: { re: 1, im: 0 }, noise: 0.01 };
    const constant = cramerRaoBound({ ...input, offset: "constant" });
    const slope = cramerRaoBound(input);
    expect(slope.f0StdHz).toBeGreaterThan(constant.f0StdHz);
    expect(slope.qStd).toBeGreaterThan(constant.qStd);
  });

  it("refuses what cannot be bounded", () => {
    const input = { frequencyHz: linearGrid(980, 1020, 201), readout: "velocity" as const, f0Hz: 1000, q: 100, a: { re: 1, im: 0 }, noise: 0.01 };
    expect(() => cramerRaoBound({ ...input, frequencyHz: linearGrid(980, 1020, 10) })).toThrow(RangeError);
    expect(() => cramerRaoBound({ ...input, frequencyHz: new Float64Array(20).fill(1000) })).toThrow(RangeError);
    expect(() => cramerRaoBound({ ...input, noise: 0 })).toThrow(RangeError);
    expect(() => cramerRaoBound({ ...input, q: -1 })).toThrow(RangeError);
  });
});
