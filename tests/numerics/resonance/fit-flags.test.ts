import { describe, expect, it } from "vitest";
import { bentModel, bentPower, emptyBentModel } from "@/lib/numerics/resonance/bent-model";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { prepareSweep } from "@/lib/numerics/resonance/prepare";
import { emptyProjectedModel, projectedModel } from "@/lib/numerics/resonance/projected-model";
import { residualsOf } from "@/lib/numerics/resonance/residuals";
import { inverseColumn } from "@/lib/numerics/resonance/small-linear";
import { linearGrid, type FitOptions, type Readout } from "@/lib/numerics/resonance/types";
import { Dice, magnitudeOf, noisySweep, type ComplexSweep } from "@/tests/numerics/resonance/sweeps";

const F0 = 1000;
const Q = 100;
const HALF_WIDTH = F0 / (2 * Q);
const velocity: FitOptions = { readout: "velocity" };

function sweepOf({ from, to, points = 201, snr = 200, q = Q, seed = 1 }: { from: number; to: number; points?: number; snr?: number; q?: number; seed?: number }): ComplexSweep {
  const dice = new Dice(seed);
  const parameters = { readout: "velocity" as const, f0Hz: F0, q, a: dice.phasor(1), b: dice.phasor(3) };
  return noisySweep(linearGrid(from, to, points), parameters, 1 / snr, dice);
}

/** A hardening or softening resonance swept in the order of its frequencies, keeping to its branch. */
function bentSweep(
  bend: number,
  { snr = 300, descending = false, seed = 2, readout = "velocity", offset = 0 }: { snr?: number; descending?: boolean; seed?: number; readout?: Readout; offset?: number } = {},
): ComplexSweep {
  const dice = new Dice(seed);
  const frequencyHz = linearGrid(F0 - 8 * HALF_WIDTH, F0 + 8 * HALF_WIDTH, 201);
  if (descending) frequencyHz.reverse();
  let near = 0.5;
  const b = dice.phasor(offset);
  const re = new Float64Array(201);
  const im = new Float64Array(201);
  frequencyHz.forEach((f, i) => {
    const local = bend * (F0 / f) ** 3;
    const x = Q * (f / F0 - F0 / f);
    near = bentPower(x, local, near);
    const shifted = x - local * near;
    const w = F0 / f;
    re[i] = (readout === "velocity" ? near : -w * shifted * near) + b.re + dice.normal() / snr;
    im[i] = (readout === "velocity" ? -shifted * near : -w * near) + b.im + dice.normal() / snr;
  });
  return { kind: "complex", frequencyHz, re, im };
}

describe("the bent oscillator", () => {
  // Harmonic balance, Landau & Lifshitz, Mechanics, §29: ρ(1 + (x − kρ)²) = 1 with ρ the power relative to the peak.
  it("stays on the branch it came along, up and down", () => {
    const bend = 3; // three roots between x ≈ 2.2 and 3
    const swept = (xs: number[]) => {
      let near = 0.01;
      return xs.map((x) => {
        near = bentPower(x, bend, near);
        expect(near * (1 + (x - bend * near) ** 2)).toBeCloseTo(1, 9);
        return near;
      });
    };
    const xs = Array.from({ length: 601 }, (_, i) => -3 + i / 60);
    const up = swept(xs);
    const down = swept(xs.toReversed()).toReversed();
    const at = xs.findIndex((x) => x >= 2.6);
    expect(up[at]).toBeGreaterThan(0.8);
    expect(down[at]).toBeLessThan(0.4);
    expect(up[0]).toBeCloseTo(down[0], 9);
    expect(up.at(-1)).toBeCloseTo(down.at(-1) ?? NaN, 9);
  });

  it("is first judged by the very step that a refit would begin with", () => {
    for (const readout of ["velocity", "displacement"] as const) {
      const dice = new Dice(6);
      const sweep = noisySweep(linearGrid(800, 1260, 201), { readout, f0Hz: F0, q: 8, a: dice.phasor(1), b: dice.phasor(3) }, 0.01, dice);
      const { f0Hz, q } = fitResonance(sweep, { readout });
      const prepared = prepareSweep(sweep, true);
      const straight = emptyProjectedModel();
      projectedModel(prepared, readout, f0Hz, q, straight);
      const { bend, bendVariance } = residualsOf(prepared, readout, f0Hz, q, straight);
      const refit = emptyBentModel();
      bentModel(prepared, readout, f0Hz, q, 0, refit);
      const perBend = inverseColumn(refit.gram, 2, 3) ?? new Float64Array(3);
      const step = perBend[0] * refit.gradient[0] + perBend[1] * refit.gradient[1] + perBend[2] * refit.gradient[2];
      expect(bendVariance / perBend[2]).toBeCloseTo(1, 6);
      expect(bend / Math.sqrt(bendVariance) - step / Math.sqrt(perBend[2])).toBeCloseTo(0, 5);
    }
  });

  it("peaks at its bend with the height of the straight one", () => {
    expect(bentPower(0.7, 0.7, 0.5)).toBeCloseTo(1, 12);
    expect(bentPower(2, 0, 0.5)).toBeCloseTo(0.2, 12);
  });
});

describe("flags, one by one", () => {
  it("a good sweep has none", () => {
    expect(fitResonance(sweepOf({ from: 970, to: 1030 }), velocity).flags).toEqual([]);
  });

  it("edge: f0 outside the middle 80 %", () => {
    expect(fitResonance(sweepOf({ from: 995, to: 1055 }), velocity).flags).toContain("edge");
    expect(fitResonance(sweepOf({ from: 945, to: 1005 }), velocity).flags).toContain("edge");
    expect(fitResonance(sweepOf({ from: 993, to: 1053 }), velocity).flags).not.toContain("edge");
  });

  it("bent: the peak is pushed by more than 0.1 half-width, either way, swept either way, either readout", () => {
    for (const bend of [0.2, 0.8, 2.5, -0.2, -1]) {
      for (const descending of [false, true]) {
        for (const readout of ["velocity", "displacement"] as const) {
          expect(fitResonance(bentSweep(bend, { descending, readout }), { readout }).flags).toContain("bent");
        }
      }
    }
  });

  it("bent: told from the magnitude alone, with an offset or without, either readout", () => {
    for (const bend of [0.25, 0.8, 2.5, -0.25, -1]) {
      for (const descending of [false, true]) {
        for (const readout of ["velocity", "displacement"] as const) {
          for (const offset of [0, 0.5, 20]) {
            const sweep = magnitudeOf(bentSweep(bend, { descending, readout, offset, snr: 1000 }));
            expect(fitResonance(sweep, { readout }).flags, `${bend} ${descending} ${readout} ${offset}`).toContain("bent");
          }
        }
      }
    }
    for (const offset of [0, 0.5, 20]) {
      expect(fitResonance(magnitudeOf(bentSweep(0.05, { offset, snr: 3000 })), velocity).flags).not.toContain("bent");
      expect(fitResonance(magnitudeOf(bentSweep(0, { offset })), velocity).flags).toEqual([]);
      expect(fitResonance(magnitudeOf(bentSweep(0.15, { offset, snr: 15 })), velocity).flags).not.toContain("bent");
    }
  });

  it("bent: not below 0.1 half-width, and not for a straight oscillator", () => {
    expect(fitResonance(bentSweep(0.05, { snr: 3000 }), velocity).flags).not.toContain("bent");
    expect(fitResonance(bentSweep(0), velocity).flags).toEqual([]);
  });

  it("bent: not when the noise hides it", () => {
    expect(fitResonance(bentSweep(0.15, { snr: 15 }), velocity).flags).not.toContain("bent");
  });

  it("narrow: span below 2.5 half-widths", () => {
    const fit = (halfWidths: number) =>
      fitResonance(sweepOf({ from: F0 - (halfWidths / 2) * HALF_WIDTH, to: F0 + (halfWidths / 2) * HALF_WIDTH, snr: 3000 }), velocity);
    expect(fit(2.2).flags).toContain("narrow");
    expect(fit(2.8).flags).not.toContain("narrow");
  });

  it("sparse: fewer than 3 points inside the half-power band", () => {
    const fit = (points: number) => fitResonance(sweepOf({ from: 949, to: 1051, points, snr: 1000 }), velocity);
    expect(fit(19).flags).toContain("sparse");
    expect(fit(41).flags).not.toContain("sparse");
  });

  it("noisy: amplitude below 5 noises", () => {
    const fit = (snr: number) => fitResonance(sweepOf({ from: 970, to: 1030, points: 401, snr }), velocity);
    expect(fit(3.5).flags).toContain("noisy");
    expect(fit(8).flags).not.toContain("noisy");
  });

  it("distorted: residuals follow each other", () => {
    const sweep = sweepOf({ from: 970, to: 1030, snr: 1000 });
    const ripple = sweep.re.map((v, i) => v + 0.02 * Math.sin(i / 6));
    expect(fitResonance({ ...sweep, re: ripple }, velocity).flags).toContain("distorted");
  });

  it("rushed: dwell below 5 ring-down times Q/(πf0)", () => {
    const ringDown = Q / (Math.PI * F0);
    const sweep = sweepOf({ from: 970, to: 1030 });
    expect(fitResonance(sweep, { ...velocity, dwellS: 4.8 * ringDown }).flags).toEqual(["rushed"]);
    expect(fitResonance(sweep, { ...velocity, dwellS: 5.2 * ringDown }).flags).toEqual([]);
    expect(fitResonance(sweep, velocity).flags).toEqual([]);
  });

  it("failed: noise alone, a constant, one single frequency; every number is NaN", () => {
    const dice = new Dice(3);
    const frequencyHz = linearGrid(900, 1100, 201);
    const noise = () => Float64Array.from({ length: 201 }, () => dice.normal());
    const flat = new Float64Array(201).fill(2);
    for (const sweep of [
      { kind: "complex" as const, frequencyHz, re: noise(), im: noise() },
      { kind: "complex" as const, frequencyHz, re: flat, im: flat },
      { kind: "complex" as const, frequencyHz: new Float64Array(201).fill(1000), re: noise(), im: noise() },
      { kind: "magnitude" as const, frequencyHz, magnitude: flat },
    ]) {
      const fit = fitResonance(sweep, velocity);
      expect(fit.flags).toEqual(["failed"]);
      expect([fit.f0Hz, fit.q, fit.f0StdHz, fit.qStd, fit.amplitude, fit.noise, fit.snr, fit.covariance.f0q, fit.a.re]).toEqual(new Array(9).fill(NaN));
    }
  });

  it("failed: noise alone is not taken for a resonance, 300 times over", () => {
    const dice = new Dice(4);
    const frequencyHz = linearGrid(900, 1100, 201);
    let taken = 0;
    for (let k = 0; k < 300; k++) {
      const re = Float64Array.from({ length: 201 }, () => dice.normal());
      const im = Float64Array.from({ length: 201 }, () => dice.normal());
      if (!fitResonance({ kind: "complex", frequencyHz, re, im }, velocity).flags.includes("failed")) taken++;
    }
    expect(taken).toBeLessThanOrEqual(3);
  });
});
