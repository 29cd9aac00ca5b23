import { xoroshiro128plus, type RandomGenerator } from "pure-rand";
import { evaluateResonance, type ResonanceParameters } from "@/lib/numerics/resonance/model";
import { linearGrid, type Readout, type Sweep } from "@/lib/numerics/resonance/types";

export type ComplexSweep = Extract<Sweep, { kind: "complex" }>;

/** Uniform and normal numbers from a seed. */
export class Dice {
  private readonly generator: RandomGenerator;
  constructor(seed: number) {
    this.generator = xoroshiro128plus(seed);
  }
  /** Within (0, 1), 52 bits. */
  uniform(): number {
    const high = this.generator.unsafeNext() >>> 6;
    const low = this.generator.unsafeNext() >>> 6;
    return (high * 2 ** 26 + low + 0.5) / 2 ** 52;
  }
  between(low: number, high: number): number {
    return low + (high - low) * this.uniform();
  }
  normal(): number {
    return Math.sqrt(-2 * Math.log(this.uniform())) * Math.cos(2 * Math.PI * this.uniform());
  }
  phasor(modulus: number): { re: number; im: number } {
    const angle = 2 * Math.PI * this.uniform();
    return { re: modulus * Math.cos(angle), im: modulus * Math.sin(angle) };
  }
}

/** A sweep of the model with noise of standard deviation `noise` in each quadrature. */
export function noisySweep(frequencyHz: Float64Array, parameters: ResonanceParameters, noise: number, dice: Dice): ComplexSweep {
  const { re, im } = evaluateResonance(frequencyHz, parameters);
  for (let i = 0; i < re.length; i++) {
    re[i] += noise * dice.normal();
    im[i] += noise * dice.normal();
  }
  return { kind: "complex", frequencyHz, re, im };
}

export type RandomCase = {
  sweep: ComplexSweep;
  readout: Readout;
  f0Hz: number;
  q: number;
  a: { re: number; im: number };
  b: { re: number; im: number };
  c: { re: number; im: number };
  noise: number;
};

/** What a sweep looks like to an agent: all readouts and an even grid unless it says otherwise. */
export type Form = {
  readout?: Readout;
  grid?: "even" | "downward" | "uneven";
  /** An offset of a thousandth of the amplitude to all of it, with a slope up to a third of that, instead. */
  smallOffset?: true;
};

/**
 * A sweep drawn from the range the analysis manual promises for (§1): 51–801 points, amplitude to noise from 10 (20 below
 * 100 points) to 1000, span 4–20 half-widths starting at or above f0/4, f0 in its middle half, Q 3–100 000, offset up to
 * 100 times the amplitude with a slope up to 10 times it, both readouts. An uneven grid is denser towards a place of the
 * sweep, jittered and in no order.
 */
export function randomCase(dice: Dice, form: Form = {}): RandomCase {
  const n = Math.floor(dice.between(51, 802));
  const snr = (n < 100 ? 20 : 10) * 100 ** (dice.uniform() * dice.uniform());
  const q = 3 * (1e5 / 3) ** dice.uniform();
  const f0Hz = 10 ** dice.between(2, 5);
  let span = 0;
  let start = 0;
  do {
    span = (dice.between(4, 20) * f0Hz) / (2 * q);
    start = f0Hz - dice.between(0.25, 0.75) * span;
  } while (start < f0Hz / 4);
  const amplitude = 10 ** dice.between(-6, 3);
  const drawn = dice.uniform() < 0.5 ? "velocity" : "displacement";
  const readout = form.readout ?? drawn;
  const a = dice.phasor(amplitude);
  const offset = form.smallOffset ? amplitude * 1000 ** -dice.uniform() : 100 * amplitude * dice.uniform();
  const b = dice.phasor(offset);
  const c = dice.phasor(form.smallOffset ? (offset / 3) * dice.uniform() : 10 * amplitude * dice.uniform() ** 2);
  const noise = amplitude / snr;
  const sweep = noisySweep(gridOf(form.grid ?? "even", start, span, n, dice), { readout, f0Hz, q, a, b, c }, noise, dice);
  return { sweep, readout, f0Hz, q, a, b, c, noise };
}

function gridOf(grid: NonNullable<Form["grid"]>, start: number, span: number, n: number, dice: Dice): Float64Array {
  if (grid === "even") return linearGrid(start, start + span, n);
  if (grid === "downward") return linearGrid(start + span, start, n);
  const place = dice.between(0.3, 0.7);
  const strength = dice.between(0, 0.7);
  const warped = (t: number) => t - (strength * Math.sin(2 * Math.PI * (t - place))) / (2 * Math.PI);
  const places = Array.from({ length: n }, (_, i) => warped((i + 0.5 + 0.4 * (dice.uniform() - 0.5)) / n) - warped(0));
  const order = places.map((t) => ({ t, at: dice.uniform() })).sort((one, other) => one.at - other.at);
  return Float64Array.from(order, ({ t }) => start + t * span);
}

/** What is left of a sweep when the instrument tells its magnitude only. */
export function magnitudeOf({ frequencyHz, re, im }: ComplexSweep): Extract<Sweep, { kind: "magnitude" }> {
  return { kind: "magnitude", frequencyHz, magnitude: re.map((v, i) => Math.hypot(v, im[i])) };
}

export function rootMeanSquare(values: readonly number[]): number {
  return Math.sqrt(values.reduce((sum, v) => sum + v * v, 0) / values.length);
}

export function meanOf(values: readonly number[]): number {
  return values.reduce((sum, v) => sum + v, 0) / values.length;
}
