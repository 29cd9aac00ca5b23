import type { Complex, Readout } from "@/lib/numerics/resonance/types";

export type ResonanceParameters = {
  readout: Readout;
  f0Hz: number;
  q: number;
  /** Resonance term at f0. */
  a: Complex;
  /** Offset at the middle of the sweep; none by default. */
  b?: Complex;
  /** Change of the offset over the sweep; none by default. */
  c?: Complex;
};

/**
 * The response of a driven, damped oscillator with an offset, over a sweep.
 *
 *   V(f) = a·m(f) / (1 + iQ(f/f0 − f0/f)) + b + c·(f − fm)/(f2 − f1)
 *
 * m is 1 for a velocity readout and f0/(if) for a displacement readout; f1 and f2 are the sweep's
 * lowest and highest frequency, fm their middle.
 *
 * @param frequencyHz Frequencies in Hz, positive, any order. Fewer than two different ones have no
 *   span: the slope term is then left out.
 * @returns Real and imaginary parts, in the unit of a, b and c, in the order given.
 * @throws RangeError if f0 or Q is not positive and finite.
 *
 * Source: forced oscillation with viscous damping (harmonic motion m·x″ + r·x′ + k·x = F), f0 =
 * √(k/m)/2π, Q = √(km)/r; half-power points of the velocity response are exactly f0/Q apart.
 */
export function evaluateResonance(
  frequencyHz: Float64Array,
  { readout, f0Hz, q, a, b = { re: 0, im: 0 }, c = { re: 0, im: 0 } }: ResonanceParameters,
): { re: Float64Array; im: Float64Array } {
  if (!(f0Hz > 0) || !(q > 0) || !Number.isFinite(f0Hz) || !Number.isFinite(q)) {
    throw new RangeError(`f0 and Q must be positive and finite, got ${f0Hz} and ${q}`);
  }
  const n = frequencyHz.length;
  const re = new Float64Array(n);
  const im = new Float64Array(n);
  let low = Infinity;
  let high = -Infinity;
  for (let i = 0; i < n; i++) {
    const f = frequencyHz[i];
    if (f < low) low = f;
    if (f > high) high = f;
  }
  const middle = (low + high) / 2;
  const perSpan = high > low ? 1 / (high - low) : 0;

  for (let i = 0; i < n; i++) {
    const f = frequencyHz[i];
    const x = (q * (f - f0Hz) * (f + f0Hz)) / (f * f0Hz);
    const power = 1 / (1 + x * x);
    const w = f0Hz / f;
    const eRe = readout === "velocity" ? power : -w * x * power;
    const eIm = readout === "velocity" ? -x * power : -w * power;
    const s = (f - middle) * perSpan;
    re[i] = a.re * eRe - a.im * eIm + b.re + c.re * s;
    im[i] = a.re * eIm + a.im * eRe + b.im + c.im * s;
  }
  return { re, im };
}
