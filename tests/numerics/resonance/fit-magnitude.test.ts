import { describe, expect, it } from "vitest";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { riceMean, riceSlope } from "@/lib/numerics/resonance/rice";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { Dice, meanOf, noisySweep, rootMeanSquare } from "@/tests/numerics/resonance/sweeps";

function magnitudeSweep({ q, offset, slope, snr, dice }: { q: number; offset: number; slope: number; snr: number; dice: Dice }) {
  const span = (dice.between(6, 12) * 1000) / (2 * q);
  const start = 1000 - dice.between(0.35, 0.65) * span;
  const parameters = { readout: "velocity" as const, f0Hz: 1000, q, a: dice.phasor(1), b: dice.phasor(offset), c: dice.phasor(slope) };
  const { frequencyHz, re, im } = noisySweep(linearGrid(start, start + span, 401), parameters, 1 / snr, dice);
  return { kind: "magnitude" as const, frequencyHz, magnitude: re.map((v, i) => Math.hypot(v, im[i])) };
}

describe("magnitude sweeps", () => {
  for (const [name, offset, slope] of [["no offset", 0, 0], ["a small offset", 0.3, 0.1], ["an offset of 3 |a|", 3, 0.2], ["an offset of 50 |a|", 50, 1]] as const) {
    it(`${name}: 30 sweeps scatter as stated`, () => {
      const dice = new Dice(40);
      const f0Errors: number[] = [];
      const qErrors: number[] = [];
      for (let k = 0; k < 30; k++) {
        const q = 10 ** dice.between(1.3, 4);
        const fit = fitResonance(magnitudeSweep({ q, offset, slope, snr: 200, dice }), { readout: "velocity" });
        expect(fit.flags).toEqual([]);
        f0Errors.push((fit.f0Hz - 1000) / fit.f0StdHz);
        qErrors.push((fit.q - q) / fit.qStd);
      }
      for (const errors of [f0Errors, qErrors]) {
        expect(rootMeanSquare(errors)).toBeGreaterThan(0.6);
        expect(rootMeanSquare(errors)).toBeLessThan(1.4);
        expect(Math.abs(meanOf(errors))).toBeLessThan(0.7);
      }
    }, 30_000);
  }

  it("a weak resonance between points of pure noise: neither Q nor the noise is taken for less, 60 sweeps", () => {
    // Uncorrected, the wings, where |z| is all noise, have a lifted mean and half the variance.
    const dice = new Dice(41);
    const noises: number[] = [];
    const qs: number[] = [];
    for (let k = 0; k < 60; k++) {
      const { frequencyHz, re, im } = noisySweep(linearGrid(900, 1100, 401), { readout: "velocity", f0Hz: 1000, q: 100, a: dice.phasor(1) }, 1 / 8, dice);
      const fit = fitResonance({ kind: "magnitude", frequencyHz, magnitude: re.map((v, i) => Math.hypot(v, im[i])) }, { readout: "velocity", offsetSlope: false });
      qs.push((fit.q - 100) / fit.qStd);
      noises.push(8 * fit.noise);
    }
    expect(Math.abs(meanOf(qs))).toBeLessThan(0.4);
    expect(Math.abs(meanOf(noises) - 1)).toBeLessThan(0.04);
  }, 30_000);
});

describe("Rice's mean", () => {
  it("is σ√(π/2) without a signal, from Abramowitz & Stegun table 9.8 at ν = 2σ, and ν far above the noise", () => {
    expect(riceMean(0, 3)).toBeCloseTo(3 * Math.sqrt(Math.PI / 2), 6);
    // e⁻¹I0(1) = 0.4657596077, e⁻¹I1(1) = 0.2079104154.
    expect(riceMean(2, 1)).toBeCloseTo(Math.sqrt(Math.PI / 2) * (3 * 0.4657596077 + 2 * 0.2079104154), 6);
    expect(riceMean(1000, 1)).toBeCloseTo(1000.0005, 7);
    expect(riceMean(5, 0)).toBe(5);
  });

  it("has the slope it states, across the change of formula", () => {
    for (const nu of [0.1, 1, 3, 3.9, 10, 19.9, 20.1, 50]) {
      const difference = (riceMean(nu + 1e-3, 1) - riceMean(nu - 1e-3, 1)) / 2e-3;
      expect(riceSlope(nu, 1)).toBeCloseTo(difference, 3);
    }
  });

  it("agrees with simulated moduli", () => {
    const dice = new Dice(42);
    for (const nu of [0.5, 2, 6]) {
      let sum = 0;
      for (let k = 0; k < 40_000; k++) sum += Math.hypot(nu + dice.normal(), dice.normal());
      expect(Math.abs(sum / 40_000 - riceMean(nu, 1))).toBeLessThan(0.02);
    }
  });
});
