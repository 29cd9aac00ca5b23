import { beforeAll, describe, expect, it } from "vitest";
import { ringDownBound } from "@/lib/numerics/resonance/cramer-rao-ring-down";
import { fitRingDown } from "@/lib/numerics/resonance/fit-ring-down";
import { Dice, meanOf, rootMeanSquare } from "@/tests/numerics/resonance/sweeps";

// LONGREED_FULL=1 draws as many decays as the analysis manual asks of sweeps; the short form allows for its chance.
const FULL = process.env.LONGREED_FULL === "1";
const DECAYS = FULL ? 10_000 : 600;
const CHANCE = FULL ? 0 : 2.5 / Math.sqrt(2 * DECAYS);
const SEED = 20_260_402;

type Tone = { f0Hz: number; q: number; sampleHz: number; n: number; noise: number; offset?: number; phase?: number; bend?: number };

/**
 * Free decay of an oscillator of undamped frequency f0: f_d = f0√(1 − 1/4Q²), τ = Q/(πf0). With a bend its frequency is higher
 * at first by so many half-widths 1/(2πτ) and goes down with the square of the amplitude.
 */
function ringDown({ f0Hz, q, sampleHz, n, noise, offset = 0, phase = 0, bend = 0 }: Tone, dice: Dice): Float64Array {
  const fd = f0Hz * Math.sqrt(1 - 1 / (4 * q * q));
  const tau = q / (Math.PI * f0Hz);
  return Float64Array.from({ length: n }, (_, i) => {
    const t = i / sampleHz;
    // ∫ bend/τ · e^(−2t/τ) dt
    const turned = (bend / 2) * (1 - Math.exp((-2 * t) / tau));
    return offset + Math.exp(-t / tau) * Math.cos(2 * Math.PI * fd * t + turned + phase) + noise * dice.normal();
  });
}

/** 500–8 000 samples over 0.7–15 ring-down times, at least 2.5 samples a cycle, Q from 3 on, amplitude to noise 10–1 000. */
function randomTone(dice: Dice): Tone & { phase: number } {
  for (;;) {
    const n = Math.floor(500 * 16 ** dice.uniform());
    const sampleHz = 10 ** dice.between(3, 6);
    const f0Hz = sampleHz * 0.02 * 20 ** dice.uniform();
    const q = (Math.PI * f0Hz * n) / (sampleHz * 0.7 * (15 / 0.7) ** dice.uniform());
    const noise = 10 ** -dice.between(1, 3);
    if (q >= 3) return { f0Hz, q, sampleHz, n, noise, offset: dice.normal(), phase: 2 * Math.PI * dice.uniform() };
  }
}

describe(`ring-downs of every length, ${DECAYS} of them, seed ${SEED}`, () => {
  const dice = new Dice(SEED);
  const f0 = { againstBound: [] as number[], againstStated: [] as number[] };
  const q = { againstBound: [] as number[], againstStated: [] as number[] };
  const seen = { failed: 0, beyondSix: 0, bent: 0, evaluations: 0 };
  beforeAll(() => {
    for (let k = 0; k < DECAYS; k++) {
      const tone = randomTone(dice);
      const bound = ringDownBound({ ...tone, amplitude: 1 });
      const fit = fitRingDown({ sampleHz: tone.sampleHz, startS: 0, volts: ringDown(tone, dice) });
      if (fit.flags.includes("failed")) {
        seen.failed++;
        continue;
      }
      f0.againstBound.push((fit.f0Hz - tone.f0Hz) / bound.f0StdHz);
      f0.againstStated.push((fit.f0Hz - tone.f0Hz) / fit.f0StdHz);
      q.againstBound.push((fit.q - tone.q) / bound.qStd);
      q.againstStated.push((fit.q - tone.q) / fit.qStd);
      if (Math.max(Math.abs(f0.againstBound.at(-1) ?? 0), Math.abs(q.againstBound.at(-1) ?? 0)) > 6) seen.beyondSix++;
      if (fit.flags.includes("bent")) seen.bent++;
      seen.evaluations += fit.evaluations;
    }
    if (process.env.LONGREED_FIGURES === "1") {
      const figures = (errors: typeof f0) => [rootMeanSquare(errors.againstBound), rootMeanSquare(errors.againstStated), meanOf(errors.againstBound)].map((v) => v.toFixed(3)).join(" ");
      process.stdout.write(`ring-down: f0 ${figures(f0)}; Q ${figures(q)}; ${JSON.stringify(seen)}\n`);
    }
  }, 900_000);

  it("none fails, none is off by more than six times the bound, hardly one is called bent", () => {
    expect(seen.failed).toBe(0);
    expect(seen.beyondSix).toBe(0);
    expect(seen.bent).toBeLessThanOrEqual(DECAYS / 1000);
  });

  for (const [quantity, errors] of [["f0", f0], ["Q", q]] as const) {
    it(`${quantity} scatters within 5 % of the Cramér–Rao bound, as stated, with a bias below a tenth of it`, () => {
      expect(Math.abs(rootMeanSquare(errors.againstBound) - 1)).toBeLessThan(0.05 + CHANCE);
      expect(Math.abs(rootMeanSquare(errors.againstStated) - 1)).toBeLessThan(0.05 + CHANCE);
      expect(Math.abs(meanOf(errors.againstBound))).toBeLessThan(0.1 + (FULL ? 0 : 2.5 / Math.sqrt(DECAYS)));
    });
  }
});

describe("the bound of a ring-down", () => {
  it("of a decay slow against the record is that of a steady real tone", () => {
    // Rife & Boorstyn 1974, eq. 17, phase and amplitude unknown: var ω = 12σ²/(b²T²N(N² − 1)) for a complex tone with σ² in each
    // quadrature; a real tone of many cycles has half the information: 24.
    const [sampleHz, n, noise] = [10_000, 4000, 0.01];
    const bound = ringDownBound({ sampleHz, n, f0Hz: 1234.5, q: 1e7, amplitude: 2, phase: 0.3, noise });
    const published = Math.sqrt((24 * noise ** 2 * sampleHz ** 2) / (2 ** 2 * n * (n * n - 1))) / (2 * Math.PI);
    expect(Math.abs(bound.f0StdHz / published - 1)).toBeLessThan(2e-3);
  });

  it("of a record much longer than a slow decay is √(16γ³/fs)·σ/A for ω and γ alike", () => {
    // Σ A²t²e^(−2γt)/2 less its projection on the phase: A²fs/(16γ³), as in Yao & Pandit 1995 for N → ∞.
    const [sampleHz, f0Hz, q] = [50_000, 2000, 100];
    const gamma = (Math.PI * f0Hz) / q;
    const published = 0.02 * Math.sqrt((16 * gamma ** 3) / sampleHz);
    const bound = ringDownBound({ sampleHz, n: 10_000, f0Hz, q, amplitude: 1, phase: 1, noise: 0.02 });
    expect(Math.abs((bound.f0StdHz * 2 * Math.PI) / published - 1)).toBeLessThan(0.01);
    expect(Math.abs(((bound.qStd / q) * gamma) / published - 1)).toBeLessThan(0.01);
  });

  it("is what a fit states at its own numbers", () => {
    const dice = new Dice(7);
    for (let k = 0; k < 20; k++) {
      const tone = randomTone(dice);
      const fit = fitRingDown({ sampleHz: tone.sampleHz, startS: 0, volts: ringDown(tone, dice) });
      const bound = ringDownBound({ ...tone, f0Hz: fit.f0Hz, q: fit.q, amplitude: fit.amplitude, phase: Math.atan2(-fit.a.im, fit.a.re), noise: fit.noise });
      expect(Math.abs(fit.f0StdHz / bound.f0StdHz - 1)).toBeLessThan(1e-6);
      expect(Math.abs(fit.qStd / bound.qStd - 1)).toBeLessThan(1e-6);
    }
  });

  it("refuses what cannot be bounded", () => {
    const input = { sampleHz: 1000, n: 500, f0Hz: 100, q: 20, amplitude: 1, phase: 0, noise: 0.1 };
    for (const bad of [{ n: 10 }, { q: 0.5 }, { noise: 0 }, { f0Hz: -1 }, { amplitude: NaN }]) expect(() => ringDownBound({ ...input, ...bad })).toThrow(RangeError);
  });
});

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

  it("failed: noise alone is not taken for a decay, 300 times over", () => {
    const dice = new Dice(8);
    let taken = 0;
    for (let k = 0; k < 300; k++) {
      const volts = Float64Array.from({ length: 1000 }, () => dice.normal());
      if (!fitRingDown({ sampleHz: 1000, startS: 0, volts }).flags.includes("failed")) taken++;
    }
    expect(taken).toBeLessThanOrEqual(3);
  });

  it("bent: a frequency that falls with the amplitude by more than 0.1 half-width, either way, and not below, nor in noise", () => {
    const dice = new Dice(6);
    const tone = { f0Hz: 700, q: 200, sampleHz: 10_000, n: 6000 };
    const flags = (bend: number, noise: number) => fitRingDown({ sampleHz: 10_000, startS: 0, volts: ringDown({ ...tone, bend, noise, phase: 1 }, dice) }).flags;
    for (const bend of [0.2, 0.8, 3, 8, -0.2, -1, -5]) expect(flags(bend, 0.002), String(bend)).toContain("bent");
    expect(flags(0, 0.002)).toEqual([]);
    expect(flags(0.05, 0.0005)).not.toContain("bent");
    expect(flags(0.15, 0.2)).not.toContain("bent");
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
