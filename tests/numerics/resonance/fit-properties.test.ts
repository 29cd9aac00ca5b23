import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid, type Sweep } from "@/lib/numerics/resonance/types";
import { Dice, noisySweep, randomCase, type ComplexSweep } from "@/tests/numerics/resonance/sweeps";

const seeds = fc.integer({ min: 1, max: 1e9 });
const relative = (found: number, expected: number) => Math.abs(found / expected - 1);

describe("recovery of known truth", () => {
  it("f0, Q, a, b and c of a sweep without noise", () => {
    fc.assert(
      fc.property(seeds, fc.double({ min: 3, max: 1e5, noNaN: true }), fc.constantFrom("velocity" as const, "displacement" as const), (seed, q, readout) => {
        const dice = new Dice(seed);
        const span = (dice.between(4, Math.min(20, 1.9 * q)) * 800) / (2 * q);
        const start = 800 - dice.between(0.3, 0.7) * Math.min(span, 1000);
        const frequencyHz = linearGrid(start, start + span, 201);
        const [a, b, c] = [dice.phasor(1), dice.phasor(5), dice.phasor(1)];
        const sweep = { kind: "complex" as const, frequencyHz, ...evaluateResonance(frequencyHz, { readout, f0Hz: 800, q, a, b, c }) };
        const fit = fitResonance(sweep, { readout });
        expect(relative(fit.f0Hz, 800) * 2 * q).toBeLessThan(1e-7);
        expect(relative(fit.q, q)).toBeLessThan(1e-7);
        for (const [found, expected] of [[fit.a, a], [fit.b, b], [fit.c, c]]) {
          expect(Math.hypot(found.re - expected.re, found.im - expected.im)).toBeLessThan(1e-6);
        }
      }),
      { seed: 11, numRuns: 200 },
    );
  });

  it("an oscillator narrow against a wide search sweep", () => {
    const dice = new Dice(5);
    for (let k = 0; k < 100; k++) {
      const f0Hz = dice.between(500, 1500);
      const q = dice.between(150, 400);
      const sweep = noisySweep(linearGrid(400, 1600, 2001), { readout: "velocity", f0Hz, q, a: dice.phasor(1), b: dice.phasor(20) }, 0.02, dice);
      const fit = fitResonance(sweep, { readout: "velocity" });
      expect(Math.abs(fit.f0Hz - f0Hz)).toBeLessThan(6 * fit.f0StdHz);
      expect(Math.abs(fit.q - q)).toBeLessThan(6 * fit.qStd);
    }
  });

  it("uneven grids", () => {
    const dice = new Dice(6);
    for (let k = 0; k < 100; k++) {
      const frequencyHz = Float64Array.from({ length: 151 }, () => 1000 + 15 * dice.normal());
      const sweep = noisySweep(frequencyHz, { readout: "velocity", f0Hz: 1003, q: 60, a: dice.phasor(1), b: dice.phasor(50) }, 0.02, dice);
      const fit = fitResonance(sweep, { readout: "velocity" });
      expect(Math.abs(fit.f0Hz - 1003)).toBeLessThan(6 * fit.f0StdHz);
      expect(Math.abs(fit.q - 60)).toBeLessThan(6 * fit.qStd);
    }
  });
});

function turned(sweep: ComplexSweep, turn: { re: number; im: number }): ComplexSweep {
  return {
    ...sweep,
    re: sweep.re.map((v, i) => v * turn.re - sweep.im[i] * turn.im),
    im: sweep.im.map((v, i) => v * turn.re + sweep.re[i] * turn.im),
  };
}

describe("what must not change the answer", () => {
  const againstError = (seed: number, change: (sweep: ComplexSweep, dice: Dice) => { sweep: ComplexSweep; timesHz?: number; guess?: { f0Hz: number; q: number } }) => {
    const dice = new Dice(seed);
    const { sweep, readout } = randomCase(dice);
    const one = fitResonance(sweep, { readout });
    const { sweep: changed, timesHz = 1, guess } = change(sweep, dice);
    const other = fitResonance(changed, { readout, guess });
    expect(Math.abs(other.f0Hz / timesHz - one.f0Hz) / one.f0StdHz).toBeLessThan(5e-3);
    expect(Math.abs(other.q - one.q) / one.qStd).toBeLessThan(5e-3);
    expect(relative(other.qStd, one.qStd)).toBeLessThan(1e-2);
    expect(relative(other.f0StdHz / timesHz, one.f0StdHz)).toBeLessThan(1e-2);
    expect(other.flags).toEqual(one.flags);
  };
  const check = (change: Parameters<typeof againstError>[1]) =>
    fc.assert(fc.property(seeds, (seed) => againstError(seed, change)), { seed: 12, numRuns: 100 });

  it("gain and phase of the amplifier", () => check((sweep, dice) => ({ sweep: turned(sweep, dice.phasor(1e-3)) })));

  it("another offset", () =>
    check((sweep, dice) => {
      const { re, im } = dice.phasor(Math.hypot(sweep.re[0], sweep.im[0]));
      return { sweep: { ...sweep, re: sweep.re.map((v) => v + re), im: sweep.im.map((v) => v + im) } };
    }));

  it("the sweep taken downwards", () =>
    check((sweep) => ({
      sweep: { kind: "complex", frequencyHz: sweep.frequencyHz.toReversed(), re: sweep.re.toReversed(), im: sweep.im.toReversed() },
    })));

  it("the sweep taken in any order", () =>
    check((sweep, dice) => {
      const order = Array.from(sweep.frequencyHz.keys()).sort(() => dice.uniform() - 0.5);
      const pick = (column: Float64Array) => Float64Array.from(order, (i) => column[i]);
      return { sweep: { kind: "complex", frequencyHz: pick(sweep.frequencyHz), re: pick(sweep.re), im: pick(sweep.im) } };
    }));

  it("frequencies in another unit", () => check((sweep) => ({ sweep: { ...sweep, frequencyHz: sweep.frequencyHz.map((f) => 1e3 * f) }, timesHz: 1e3 })));

  it("a guess, good or wild", () =>
    check((sweep, dice) => ({ sweep, guess: { f0Hz: sweep.frequencyHz[0] * dice.between(0.5, 2), q: 10 ** dice.between(0, 6) } })));

  it("the caller's arrays stay as they were", () => {
    const { sweep, readout } = randomCase(new Dice(7));
    const before = [sweep.frequencyHz, sweep.re, sweep.im].map((column) => column.slice());
    fitResonance(sweep, { readout });
    expect([sweep.frequencyHz, sweep.re, sweep.im]).toEqual(before);
  });
});

describe("malformed input", () => {
  const frequencyHz = linearGrid(900, 1100, 21);
  const ones = new Float64Array(21).fill(1);
  const options = { readout: "velocity" as const };
  const spoilt = (column: Float64Array, value: number) => column.with(7, value);
  const bad: [string, Sweep][] = [
    ["unequal lengths", { kind: "complex", frequencyHz, re: ones, im: ones.subarray(1) }],
    ["unequal lengths of a magnitude", { kind: "magnitude", frequencyHz, magnitude: ones.subarray(1) }],
    ["ten points", { kind: "complex", frequencyHz: frequencyHz.subarray(0, 10), re: ones.subarray(0, 10), im: ones.subarray(0, 10) }],
    ["a voltage that is not a number", { kind: "complex", frequencyHz, re: spoilt(ones, NaN), im: ones }],
    ["an infinite voltage", { kind: "complex", frequencyHz, re: ones, im: spoilt(ones, -Infinity) }],
    ["an infinite magnitude", { kind: "magnitude", frequencyHz, magnitude: spoilt(ones, Infinity) }],
    ["a frequency of zero", { kind: "complex", frequencyHz: spoilt(frequencyHz, 0), re: ones, im: ones }],
    ["a frequency that is not a number", { kind: "complex", frequencyHz: spoilt(frequencyHz, NaN), re: ones, im: ones }],
    ["an infinite frequency", { kind: "complex", frequencyHz: spoilt(frequencyHz, Infinity), re: ones, im: ones }],
  ];
  for (const [name, sweep] of bad) it(`throws RangeError for ${name}`, () => expect(() => fitResonance(sweep, options)).toThrow(RangeError));
  it("throws RangeError for a guess that is not positive", () => {
    const { sweep } = randomCase(new Dice(8));
    expect(() => fitResonance(sweep, { ...options, guess: { f0Hz: 0, q: 10 } })).toThrow(RangeError);
    expect(() => fitResonance(sweep, { ...options, guess: { f0Hz: 10, q: NaN } })).toThrow(RangeError);
  });
  it("eleven points are enough", () => {
    const grid = linearGrid(960, 1040, 11);
    const response = evaluateResonance(grid, { readout: "velocity", f0Hz: 1003, q: 50, a: { re: 1, im: 0 }, b: { re: 3, im: 2 } });
    expect(fitResonance({ kind: "complex", frequencyHz: grid, ...response }, options).f0Hz).toBeCloseTo(1003, 6);
  });
});
