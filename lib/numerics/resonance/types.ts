import type { FitFlag } from "@/lib/numerics/resonance/flags";

export type { FitFlag };

/** What the instrument's voltage is proportional to: an induced voltage to velocity, an optical or capacitive one to displacement. */
export type Readout = "velocity" | "displacement";

export type Complex = { re: number; im: number };

/**
 * One frequency sweep. Frequencies in Hz, in any order and spacing; voltages in any one unit.
 * All arrays have the same length, at least 11, and hold finite numbers only.
 */
export type Sweep =
  | { kind: "complex"; frequencyHz: Float64Array; re: Float64Array; im: Float64Array }
  | { kind: "magnitude"; frequencyHz: Float64Array; magnitude: Float64Array };

export type FitOptions = {
  readout: Readout;
  /** Time spent at each point, s. Without it nothing is said about `rushed`. */
  dwellS?: number;
  /** Whether the offset may have a slope over the sweep. Default true. */
  offsetSlope?: boolean;
  /** Where to start. Without it, or where it leads nowhere, the sweep itself tells. */
  guess?: { f0Hz: number; q: number };
};

/** Parameters of a complex sweep in their order: resonance a, offset b and its slope c have a part in phase and one in quadrature. */
export const RESONANCE_PARAMETERS = ["f0Hz", "q", "aRe", "aIm", "bRe", "bIm", "cRe", "cIm"] as const;

/** Variances in Hz² and 1, covariance in Hz. */
export type FitCovariance = { f0f0: number; f0q: number; qq: number };

export type ResonanceFit = {
  /** Undamped natural frequency, Hz. */
  f0Hz: number;
  /** Quality factor √(km)/r. */
  q: number;
  f0StdHz: number;
  qStd: number;
  covariance: FitCovariance;
  /** |a|: the resonance term at f0, in the unit of the sweep. Of a magnitude sweep the least |a| that explains it. */
  amplitude: number;
  /** Standard deviation of the noise in each quadrature, in the unit of the sweep. */
  noise: number;
  /** amplitude / noise. */
  snr: number;
  /** In the order of FLAGS; empty when there is nothing to remark. */
  flags: FitFlag[];
  /** Resonance term at f0. A magnitude sweep knows no phase: there a is real and b, c are relative to it. */
  a: Complex;
  /** Offset at the middle of the sweep. */
  b: Complex;
  /** Change of the offset from the sweep's lowest to its highest frequency. */
  c: Complex;
  /** How often the model was evaluated over the whole sweep. */
  evaluations: number;
};

/**
 * n frequencies equally spaced from startHz to stopHz, both included.
 *
 * @throws RangeError if n is not a whole number ≥ 2 or an end is not finite.
 */
export function linearGrid(startHz: number, stopHz: number, n: number): Float64Array {
  if (!Number.isInteger(n) || n < 2) throw new RangeError(`a grid needs a whole number of points ≥ 2, got ${n}`);
  if (!Number.isFinite(startHz) || !Number.isFinite(stopHz)) throw new RangeError("the ends of a grid must be finite");
  const grid = new Float64Array(n);
  const step = (stopHz - startHz) / (n - 1);
  for (let i = 0; i < n; i++) grid[i] = startHz + i * step;
  grid[n - 1] = stopHz;
  return grid;
}
