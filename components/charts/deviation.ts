import type { Dash, Pen } from "./pens";

/** One averaging time: deviation with the limits of its band, and how much it rests on. */
export type DeviationPoint = {
  /** s */
  tau: number;
  deviation: number;
  low: number;
  high: number;
  /** Terms in the sum. */
  n: number;
  /** Noise that rules here: `white`, `flicker`, `random walk`, `drift`. */
  noise?: string;
  /** Fewer than 30 averages: the noise is that of the last stretch that had them. */
  assumed?: boolean;
};

export type DeviationCurve = {
  id: string;
  label: string;
  pen: Pen;
  dash?: Dash;
  /** Inside phases: filled marks and a line. */
  within: readonly DeviationPoint[];
  /** From phase to phase: hollow marks with bars, no line. */
  across?: readonly DeviationPoint[];
};

export const isDrawable = ({ tau, deviation }: DeviationPoint): boolean => tau > 0 && deviation > 0 && Number.isFinite(tau) && Number.isFinite(deviation);

/** A log axis that holds the values with room; always at least a decade. */
export function logRange(values: Iterable<number>, room = 1.35, roomBelow = room): [number, number] {
  let low = Infinity;
  let high = 0;
  for (const value of values) {
    if (!(value > 0) || !Number.isFinite(value)) continue;
    low = Math.min(low, value);
    high = Math.max(high, value);
  }
  if (low > high) return [1, 10];
  low /= roomBelow;
  high *= room;
  const missing = Math.sqrt(Math.max(1, 10 / (high / low)));
  return [low / missing, high * missing];
}

/** Between the longest averaging time inside a phase and the shortest from phase to phase nothing was measured. */
export function notMeasured(curves: readonly DeviationCurve[]): [number, number] | undefined {
  let longest = 0;
  let shortest = Infinity;
  for (const { within, across = [] } of curves) {
    for (const { tau } of within) longest = Math.max(longest, tau);
    for (const { tau } of across) shortest = Math.min(shortest, tau);
  }
  if (!(longest > 0) || !Number.isFinite(shortest)) return undefined;
  const [from, to] = [longest * 1.22, shortest / 1.22];
  return to > from * 1.15 ? [from, to] : undefined;
}

/** Neighbouring averaging times under one noise, as stretches from half an octave before to half an octave after. */
export function noiseStretches(points: readonly DeviationPoint[]): { from: number; to: number; noise: string }[] {
  const stretches: { from: number; to: number; noise: string }[] = [];
  for (const { tau, noise } of points) {
    if (!noise) continue;
    const last = stretches[stretches.length - 1];
    if (last?.noise === noise) last.to = tau * Math.SQRT2;
    else stretches.push({ from: tau / Math.SQRT2, to: tau * Math.SQRT2, noise });
  }
  return stretches;
}

/** Heights of labels, moved down until those nearer than `reach` along x are at least `apart` from each other. */
export function spreadLabels(places: readonly { x: number; y: number }[], apart: number, reach: number): number[] {
  const settled: { x: number; y: number }[] = [];
  const heights = places.map(({ y }) => y);
  const order = places.map((place, i) => ({ ...place, i })).sort((a, b) => a.y - b.y);
  for (const { x, y, i } of order) {
    const near = settled.filter((label) => Math.abs(label.x - x) < reach).map((label) => label.y);
    const free = near.reduce((height, taken) => (height - taken < apart ? taken + apart : height), y);
    settled.push({ x, y: free });
    heights[i] = free;
  }
  return heights;
}
