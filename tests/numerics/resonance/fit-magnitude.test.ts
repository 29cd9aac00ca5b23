import { describe, expect, it } from "vitest";
import { magnitudeBound, type MagnitudeBoundInput } from "@/lib/numerics/resonance/cramer-rao-magnitude";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { riceInformation } from "@/lib/numerics/resonance/rice";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { Dice, magnitudeOf, meanOf, noisySweep, randomCase, rootMeanSquare } from "@/tests/numerics/resonance/sweeps";

const none = { re: 0, im: 0 };

describe("magnitude sweeps", () => {
  for (const [name, offset, slope] of [["no offset", 0, 0], ["a small offset", 0.1, 0.03], ["an offset of 3 |a|", 3, 0.2], ["an offset of 50 |a|", 50, 1]] as const) {
    it(`${name}: 300 sweeps scatter as stated, without bias, and no resonance bends`, () => {
      const dice = new Dice(40);
      const f0Errors: number[] = [];
      const qErrors: number[] = [];
      for (let k = 0; k < 300; k++) {
        const q = 10 ** dice.between(1, 4);
        const span = (dice.between(5, 12) * 1000) / (2 * q);
        const start = 1000 - dice.between(0.35, 0.65) * span;
        const parameters = { readout: "velocity" as const, f0Hz: 1000, q, a: dice.phasor(1), b: dice.phasor(offset), c: dice.phasor(slope) };
        const fit = fitResonance(magnitudeOf(noisySweep(linearGrid(start, start + span, 201), parameters, 1 / 100, dice)), { readout: "velocity" });
        expect(fit.flags).toEqual([]);
        f0Errors.push((fit.f0Hz - 1000) / fit.f0StdHz);
        qErrors.push((fit.q - q) / fit.qStd);
      }
      for (const errors of [f0Errors, qErrors]) {
        expect(Math.max(...errors.map(Math.abs))).toBeLessThan(6);
        expect(Math.abs(rootMeanSquare(errors) - 1)).toBeLessThan(0.11);
        expect(Math.abs(meanOf(errors))).toBeLessThan(0.16);
      }
    });
  }

  it("recovers f0 and Q without noise, down to Q 3, and a, b, c that make the same modulus", () => {
    const dice = new Dice(43);
    for (let k = 0; k < 60; k++) {
      const { sweep, readout, f0Hz, q, noise, ...terms } = randomCase(dice);
      const clean = { kind: "complex" as const, frequencyHz: sweep.frequencyHz, ...evaluateResonance(sweep.frequencyHz, { readout, f0Hz, q, ...terms }) };
      const { magnitude } = magnitudeOf(clean);
      const fit = fitResonance({ kind: "magnitude", frequencyHz: sweep.frequencyHz, magnitude }, { readout });
      const bound = magnitudeBound({ frequencyHz: sweep.frequencyHz, readout, f0Hz, q, noise, ...terms });
      expect(Math.abs(fit.f0Hz - f0Hz) / bound.f0StdHz).toBeLessThan(0.02);
      expect(Math.abs(fit.q - q) / bound.qStd).toBeLessThan(0.02);
      const curve = evaluateResonance(sweep.frequencyHz, { readout, f0Hz: fit.f0Hz, q: fit.q, a: fit.a, b: fit.b, c: fit.c });
      const furthest = Math.max(...curve.re.map((re, i) => Math.abs(Math.hypot(re, curve.im[i]) - magnitude[i])));
      expect(furthest).toBeLessThan(2 * noise);
      expect(fit.a.im).toBe(0);
      expect(fit.amplitude / Math.hypot(terms.a.re, terms.a.im)).toBeLessThan(1.02);
    }
  });

  it("gives the smaller of two resonances that a modulus cannot tell apart", () => {
    // |a/(1 + iX) + b|² with a and b real: α = a² + 2ab and b² are the same for a′ = −a − 2b, b′ = b (a ↔ −a − 2b).
    const frequencyHz = linearGrid(970, 1030, 201);
    const moduli = [{ a: 1, b: 0.4 }, { a: 1.8, b: -0.4 }].map(({ a, b }) => {
      const curve = evaluateResonance(frequencyHz, { readout: "velocity", f0Hz: 1000, q: 100, a: { re: a, im: 0 }, b: { re: b, im: 0 } });
      return curve.re.map((re, i) => Math.hypot(re, curve.im[i]));
    });
    moduli[0].forEach((v, i) => expect(moduli[1][i]).toBeCloseTo(v, 12));
    for (const magnitude of moduli) {
      const fit = fitResonance({ kind: "magnitude", frequencyHz, magnitude }, { readout: "velocity", offsetSlope: false });
      expect(fit.amplitude).toBeCloseTo(1, 6);
      expect(fit.b.re).toBeCloseTo(0.4, 6);
      expect(fit.q).toBeCloseTo(100, 6);
    }
  });

  it("a weak resonance between points of pure noise: neither Q nor the noise is taken for less, 200 sweeps", () => {
    // In the wings |V| is all noise: its mean is lifted and its variance half.
    const dice = new Dice(41);
    const noises: number[] = [];
    const qs: number[] = [];
    for (let k = 0; k < 200; k++) {
      const sweep = noisySweep(linearGrid(900, 1100, 401), { readout: "velocity", f0Hz: 1000, q: 100, a: dice.phasor(1) }, 1 / 8, dice);
      const fit = fitResonance(magnitudeOf(sweep), { readout: "velocity", offsetSlope: false });
      qs.push((fit.q - 100) / fit.qStd);
      noises.push(8 * fit.noise);
    }
    expect(Math.abs(meanOf(qs))).toBeLessThan(0.25);
    expect(Math.abs(rootMeanSquare(qs) - 1)).toBeLessThan(0.15);
    expect(Math.abs(meanOf(noises) - 1)).toBeLessThan(0.02);
  });

  it("a resonance narrow against a wide search sweep", () => {
    const dice = new Dice(44);
    for (let k = 0; k < 50; k++) {
      const f0Hz = dice.between(500, 1500);
      const q = dice.between(150, 400);
      const sweep = noisySweep(linearGrid(400, 1600, 2001), { readout: "velocity", f0Hz, q, a: dice.phasor(1), b: dice.phasor(5 * dice.uniform()) }, 0.02, dice);
      const fit = fitResonance(magnitudeOf(sweep), { readout: "velocity" });
      expect(Math.abs(fit.f0Hz - f0Hz)).toBeLessThan(6 * fit.f0StdHz);
      expect(Math.abs(fit.q - q)).toBeLessThan(6 * fit.qStd);
    }
  });

  it("noise alone is not taken for a resonance, with an offset or without", () => {
    const dice = new Dice(45);
    const frequencyHz = linearGrid(900, 1100, 201);
    let taken = 0;
    for (let k = 0; k < 300; k++) {
      const offset = k % 2 === 0 ? 0 : 20;
      const magnitude = Float64Array.from({ length: 201 }, () => Math.hypot(offset + dice.normal(), dice.normal()));
      if (!fitResonance({ kind: "magnitude", frequencyHz, magnitude }, { readout: "velocity" }).flags.includes("failed")) taken++;
    }
    expect(taken).toBeLessThanOrEqual(3);
  });

  it("a guess, good or wild, changes nothing", () => {
    const dice = new Dice(46);
    for (let k = 0; k < 60; k++) {
      const { sweep, readout } = randomCase(dice);
      const one = fitResonance(magnitudeOf(sweep), { readout });
      const other = fitResonance(magnitudeOf(sweep), { readout, guess: { f0Hz: sweep.frequencyHz[0] * dice.between(0.5, 2), q: 10 ** dice.between(0, 6) } });
      expect(Math.abs(other.f0Hz - one.f0Hz) / one.f0StdHz).toBeLessThan(0.02);
      expect(Math.abs(other.q - one.q) / one.qStd).toBeLessThan(0.02);
      expect(other.flags).toEqual(one.flags);
    }
  });
});

describe("the bound of a magnitude sweep", () => {
  const input: MagnitudeBoundInput = {
    frequencyHz: linearGrid(980, 1020, 201), readout: "velocity", f0Hz: 1001, q: 100, a: { re: 1, im: 0 }, b: { re: 200, im: 0 }, c: { re: 0, im: 0.3 }, noise: 0.01,
  };

  it("far from zero sees the part of the resonance along the offset, turned with the offset", () => {
    const turned = magnitudeBound({ ...input, a: { re: 0, im: 1 }, b: { re: 0, im: 200 }, c: { re: -0.3, im: 0 } });
    const bound = magnitudeBound(input);
    expect(turned.f0StdHz).toBeCloseTo(bound.f0StdHz, 9);
    expect(turned.qStd).toBeCloseTo(bound.qStd, 9);
  });

  it("goes with the noise far above it, and never falls when points are left out", () => {
    const twice = magnitudeBound({ ...input, noise: 0.02 });
    const bound = magnitudeBound(input);
    expect(twice.f0StdHz / bound.f0StdHz).toBeCloseTo(2, 6);
    expect(magnitudeBound({ ...input, frequencyHz: input.frequencyHz.filter((_, i) => i % 3 !== 1) }).qStd).toBeGreaterThan(bound.qStd);
  });

  it("refuses what cannot be bounded", () => {
    expect(() => magnitudeBound({ ...input, frequencyHz: linearGrid(980, 1020, 10) })).toThrow(RangeError);
    expect(() => magnitudeBound({ ...input, frequencyHz: new Float64Array(20).fill(1000) })).toThrow(RangeError);
    expect(() => magnitudeBound({ ...input, noise: 0, b: none })).toThrow(RangeError);
    expect(() => magnitudeBound({ ...input, q: -1 })).toThrow(RangeError);
  });
});

describe("Rice's information", () => {
  it("is 1 without a signal, 1/r² far above the noise, smooth across the change of formula", () => {
    expect(riceInformation(0)).toBe(1);
    expect(riceInformation(1e-2)).toBeCloseTo(1, 3);
    expect(1e6 * riceInformation(1000)).toBeCloseTo(1, 5);
    expect(riceInformation(11.99) / riceInformation(12.01) - (12.01 / 11.99) ** 2).toBeCloseTo(0, 3);
  });

  it("is the variance of the score of simulated moduli", () => {
    // ∂ln p/∂ν by difference of ln p = ln y − (y² + r²)/2 + ln I0(ry), I0 by its integral: Abramowitz & Stegun 9.6.16.
    const lnI0 = (x: number) => {
      let sum = 0;
      for (let k = 0; k < 200; k++) sum += Math.exp(x * (Math.cos((Math.PI * (k + 0.5)) / 200) - 1)) / 200;
      return x + Math.log(sum);
    };
    const dice = new Dice(42);
    for (const r of [0.5, 1, 2, 5]) {
      let squares = 0;
      for (let k = 0; k < 8000; k++) {
        const y = Math.hypot(r + dice.normal(), dice.normal());
        squares += ((lnI0(y * (r + 1e-4)) - lnI0(y * (r - 1e-4))) / 2e-4 - r) ** 2 / 8000;
      }
      expect(Math.abs(squares / (r * r * riceInformation(r)) - 1)).toBeLessThan(0.06);
    }
  });
});
