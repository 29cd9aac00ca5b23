import { checkSweep, copyInOrder, directionOf, orderOf } from "@/lib/numerics/resonance/prepare";
import type { Sweep } from "@/lib/numerics/resonance/types";

/** A magnitude sweep in ascending order. */
export type MagnitudeSweep = {
  n: number;
  /** Hz, and 1/f. */
  f: Float64Array;
  inverseF: Float64Array;
  /** (f − fm)/(f2 − f1), from −½ to ½; all zero when the offset has no slope. */
  s: Float64Array;
  /** Squares of the magnitudes. */
  power: Float64Array;
  /** Σ of the squares. */
  energy: number;
  withSlope: boolean;
  low: number;
  high: number;
  /** Whether the sweep was taken downwards. */
  descending: boolean;
};

/** @throws RangeError unless the sweep is what `Sweep` says. */
export function prepareMagnitude(sweep: Extract<Sweep, { kind: "magnitude" }>, offsetSlope: boolean): MagnitudeSweep {
  checkSweep(sweep);
  const { frequencyHz } = sweep;
  const n = frequencyHz.length;
  const direction = directionOf(frequencyHz);
  const order = direction === 0 ? orderOf(frequencyHz) : undefined;
  const f = new Float64Array(n);
  const power = new Float64Array(n);
  copyInOrder(f, frequencyHz, direction, order);
  copyInOrder(power, sweep.magnitude, direction, order);
  const [low, high] = [f[0], f[n - 1]];
  const withSlope = offsetSlope && high > low;
  const inverseF = new Float64Array(n);
  const s = new Float64Array(n);
  const middle = (low + high) / 2;
  let energy = 0;
  for (let i = 0; i < n; i++) {
    inverseF[i] = 1 / f[i];
    if (withSlope) s[i] = (f[i] - middle) / (high - low);
    power[i] *= power[i];
    energy += power[i];
  }
  return { n, f, inverseF, s, power, energy, withSlope, low, high, descending: direction === -1 };
}
