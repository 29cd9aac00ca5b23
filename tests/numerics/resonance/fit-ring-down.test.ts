import { describe, expect, it } from "vitest";
import { fitRingDown } from "@/lib/numerics/resonance/fit-ring-down";
import { Dice, meanOf, rootMeanSquare } from "@/tests/numerics/resonance/sweeps";

type Tone = { f0Hz: number; q: number; sampleHz: number; n: number; noise: number; offset?: number; phase?: number };

/** Free decay of an oscillator of undamped frequency f0: f_d = f0√(1 − 1/4Q²), τ = Q/(πf0). */
function ringDown({ f0Hz, q, sampleHz, n, noise, offset = 0, phase = 0 }: Tone, dice: Dice): Float64Array {
  const fd = f0Hz * Math.sqrt(1 - 1 / (4 * q * q));
  const tau = q / (Math.PI * f0Hz);
  return Float64Array.from({ length: n }, (_, i) => {
    const t = i / sampleHz;
    return offset + Math.exp(-t / tau) * Math.cos(2 * Math.PI * fd * t + phase) + noise * dice.normal();
  });
}

describe("ring-down", () => {
  it("recovers f0 and Q without noise, Q from 2 to 2 000", () => {
    const dice = new Dice(1);
    for (const q of [2, 5, 20, 200, 2000]) {
      const fit = fitRingDown({ sampleHz: 20_000, startS: 0, volts: ringDown({ f0Hz: 700, q, sampleHz: 20_000, n: 6000, noise: 0, offset: 1.5, phase: 1 }, dice) });
      expect(Math.abs(fit.f0Hz / 700 - 1)).toBeLessThan(1e-9);
      expect(Math.abs(fit.q / q - 1)).toBeLessThan(1e-8);
      expect(fit.amplitude).toBeCloseTo(1, 8);
      expect(fit.b.re).toBeCloseTo(1.5, 8);
      expect(fit.flags).toEqual([]);
    }
  });

  it("states the scatter it has: 300 noisy decays", () => {
    const dice = new Dice(2);
    const f0Errors: number[] = [];
    const qErrors: number[] = [];
    for (let k = 0; k < 300; k++) {
      const f0Hz = dice.between(200, 1500);
      const q = 10 ** dice.between(0.7, 3);
      const volts = ringDown({ f0Hz, q, sampleHz: 8000, n: 2500, noise: 0.03, offset: dice.normal(), phase: 6 * dice.uniform() }, dice);
      const fit = fitRingDown({ sampleHz: 8000, startS: 0, volts });
      f0Errors.push((fit.f0Hz - f0Hz) / fit.f0StdHz);
      qErrors.push((fit.q - q) / fit.qStd);
    }
    for (const errors of [f0Errors, qErrors]) {
      expect(Math.max(...errors.map(Math.abs))).toBeLessThan(6);
      expect(Math.abs(rootMeanSquare(errors) - 1)).toBeLessThan(0.12);
      expect(Math.abs(meanOf(errors))).toBeLessThan(0.17);
    }
  }, 30_000);

  it("reaches the Cramér–Rao bound of a long, slow decay: the law of a decaying tone", () => {
    // Record much longer than τ, many cycles in τ: σ(ω) = σ(γ) = 2γ·(σ/A)·√(2γ/fs)·√2 (Fisher information of A·e^(−γt)cos ωt,
    // Σt²e^(−2γt) = fs/4γ³, less Σte^(−2γt)² / Σe^(−2γt) for the phase: fs/8γ³, times A²/2σ²).
    const dice = new Dice(3);
    const [f0Hz, q, sampleHz, noise] = [500, 50, 10_000, 0.02];
    const gamma = (Math.PI * f0Hz) / q;
    const sigmaOmega = noise * Math.sqrt((16 * gamma ** 3) / sampleHz);
    const fit = fitRingDown({ sampleHz, startS: 0, volts: ringDown({ f0Hz, q, sampleHz, n: 4000, noise }, dice) });
    expect(Math.abs((fit.f0StdHz * 2 * Math.PI) / sigmaOmega - 1)).toBeLessThan(0.05);
    expect(Math.abs((fit.qStd / q) * (gamma / sigmaOmega) - 1)).toBeLessThan(0.05);
  });

  it("leaves out what was sampled before the drive was switched off", () => {
    const dice = new Dice(4);
    const decay = ringDown({ f0Hz: 700, q: 40, sampleHz: 10_000, n: 3000, noise: 0 }, dice);
    const driven = Float64Array.from({ length: 500 }, (_, i) => Math.cos(i));
    const fit = fitRingDown({ sampleHz: 10_000, startS: -0.05, volts: Float64Array.of(...driven, ...decay) });
    expect(Math.abs(fit.f0Hz / 700 - 1)).toBeLessThan(1e-9);
  });

  it("flags: noisy below 5 noises, distorted by a second tone, failed for noise alone", () => {
    const dice = new Dice(5);
    const tone = { f0Hz: 700, q: 200, sampleHz: 10_000, n: 4000 };
    const fit = (volts: Float64Array) => fitRingDown({ sampleHz: 10_000, startS: 0, volts }).flags;
    expect(fit(ringDown({ ...tone, noise: 0.3 }, dice))).toEqual(["noisy"]);
    const clean = ringDown({ ...tone, noise: 0.01 }, dice);
    expect(fit(clean)).toEqual([]);
    expect(fit(clean.map((v, i) => v + 0.05 * Math.cos(i / 9)))).toEqual(["distorted"]);
    expect(fit(Float64Array.from({ length: 4000 }, () => dice.normal()))).toEqual(["failed"]);
    expect(fit(new Float64Array(100).fill(1))).toEqual(["failed"]);
  });

  it("refuses malformed input", () => {
    const volts = new Float64Array(100).fill(1);
    expect(() => fitRingDown({ sampleHz: 0, startS: 0, volts })).toThrow(RangeError);
    expect(() => fitRingDown({ sampleHz: 1000, startS: NaN, volts })).toThrow(RangeError);
    expect(() => fitRingDown({ sampleHz: 1000, startS: -0.095, volts })).toThrow(RangeError);
    expect(() => fitRingDown({ sampleHz: 1000, startS: 0, volts: volts.with(3, NaN) })).toThrow(RangeError);
    expect(() => fitRingDown({ sampleHz: 1000, startS: 0, volts: volts.subarray(0, 10) })).toThrow(RangeError);
  });
});
