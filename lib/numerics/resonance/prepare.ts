import type { Sweep } from "@/lib/numerics/resonance/types";

/** A sweep sorted by frequency, its offset and slope taken out of the data. Arrays may be longer than n. */
export type PreparedSweep = {
  n: number;
  /** Hz, ascending. */
  f: Float64Array;
  /** 1/f. */
  inverseF: Float64Array;
  /** (f − fm)/(f2 − f1) made orthogonal to a constant and of unit norm; all zero when the offset has no slope. */
  slope: Float64Array;
  /** Data orthogonal to constant and slope. */
  re: Float64Array;
  im: Float64Array;
  /** Σ(re² + im²). */
  energy: number;
  /** The same sum of the data as they came. */
  rawEnergy: number;
  /** What was taken out: mean, and component along `slope`. */
  meanRe: number;
  meanIm: number;
  slopeRe: number;
  slopeIm: number;
  /** (f − fm)/(f2 − f1) = slopeMean + slopeNorm·slope; norm 0 when the offset has no slope. */
  slopeMean: number;
  slopeNorm: number;
  low: number;
  high: number;
  descending: boolean;
};

export const FEWEST_POINTS = 11;

/** @throws RangeError unless the sweep is what `Sweep` says. */
export function checkSweep(sweep: Sweep): void {
  const { frequencyHz } = sweep;
  const columns = sweep.kind === "complex" ? [sweep.re, sweep.im] : [sweep.magnitude];
  const n = frequencyHz.length;
  if (n < FEWEST_POINTS) throw new RangeError(`a sweep needs at least ${FEWEST_POINTS} points, got ${n}`);
  for (let i = 0; i < n; i++) {
    if (!(frequencyHz[i] > 0) || frequencyHz[i] === Infinity) {
      throw new RangeError(`frequency ${i} must be positive and finite, got ${frequencyHz[i]}`);
    }
  }
  for (const column of columns) {
    if (column.length !== n) throw new RangeError(`a sweep of ${n} frequencies has ${column.length} values`);
    let zero = 0; // a finite number less itself is 0, anything else NaN
    for (let i = 0; i < n; i++) zero += column[i] - column[i];
    if (zero !== 0) throw new RangeError(`value ${column.findIndex((v) => !Number.isFinite(v))} of the sweep is not finite`);
  }
}

/** Whether the frequencies never fall (1), never rise (−1), or neither (0). */
export function directionOf(f: Float64Array): -1 | 0 | 1 {
  let up = true;
  let down = true;
  for (let i = 1; i < f.length && (up || down); i++) {
    if (f[i] < f[i - 1]) up = false;
    else if (f[i] > f[i - 1]) down = false;
  }
  return up ? 1 : down ? -1 : 0;
}

/** The places of the frequencies in rising order. */
export function orderOf(f: Float64Array): Uint32Array {
  return Uint32Array.from(f.keys()).sort((i, j) => f[i] - f[j]);
}

/** Copies `from` into `to` in the order of rising frequency. */
export function copyInOrder(to: Float64Array, from: Float64Array, direction: -1 | 0 | 1, order: Uint32Array | undefined): void {
  const n = from.length;
  if (direction === 1) to.set(from);
  else if (direction === -1) for (let i = 0; i < n; i++) to[i] = from[n - 1 - i];
  else if (order) for (let i = 0; i < n; i++) to[i] = from[order[i]];
}

function emptyWorkspace(capacity: number): PreparedSweep {
  const column = () => new Float64Array(capacity);
  return {
    n: 0, f: column(), inverseF: column(), slope: column(), re: column(), im: column(),
    energy: 0, rawEnergy: 0, meanRe: 0, meanIm: 0, slopeRe: 0, slopeIm: 0, slopeMean: 0, slopeNorm: 0,
    low: 0, high: 0, descending: false,
  };
}

/** One sweep at a time is fitted in a thread, so its arrays are kept and grown, not made anew. */
let workspace = emptyWorkspace(1024);

/**
 * Sorts a complex sweep and projects offset and slope out of the data.
 *
 * @returns A view on a shared workspace, valid until the next call.
 * @throws RangeError unless the sweep is what `Sweep` says.
 */
export function prepareSweep(sweep: Extract<Sweep, { kind: "complex" }>, offsetSlope: boolean): PreparedSweep {
  checkSweep(sweep);
  const { frequencyHz } = sweep;
  const n = frequencyHz.length;
  if (workspace.f.length < n) workspace = emptyWorkspace(2 * n);
  const p = workspace;
  const direction = directionOf(frequencyHz);
  const order = direction === 0 ? orderOf(frequencyHz) : undefined;
  copyInOrder(p.f, frequencyHz, direction, order);
  copyInOrder(p.re, sweep.re, direction, order);
  copyInOrder(p.im, sweep.im, direction, order);
  p.n = n;
  p.low = p.f[0];
  p.high = p.f[n - 1];
  p.descending = direction === -1;
  prepareSlope(p, offsetSlope && p.high > p.low);
  projectData(p);
  return p;
}

function prepareSlope(p: PreparedSweep, withSlope: boolean): void {
  const { n, f, inverseF, slope } = p;
  const middle = (p.low + p.high) / 2;
  const perSpan = withSlope ? 1 / (p.high - p.low) : 0;
  let sum = 0;
  for (let i = 0; i < n; i++) {
    inverseF[i] = 1 / f[i];
    slope[i] = (f[i] - middle) * perSpan;
    sum += slope[i];
  }
  const mean = sum / n;
  let squares = 0;
  for (let i = 0; i < n; i++) {
    slope[i] -= mean;
    squares += slope[i] * slope[i];
  }
  p.slopeMean = mean;
  p.slopeNorm = Math.sqrt(squares);
  if (p.slopeNorm > 0) for (let i = 0; i < n; i++) slope[i] /= p.slopeNorm;
}

function projectData(p: PreparedSweep): void {
  const { n, re, im, slope } = p;
  const originRe = re[0];
  const originIm = im[0];
  let sumRe = 0;
  let sumIm = 0;
  for (let i = 0; i < n; i++) {
    sumRe += re[i] -= originRe;
    sumIm += im[i] -= originIm;
  }
  const meanRe = sumRe / n;
  const meanIm = sumIm / n;
  let alongRe = 0;
  let alongIm = 0;
  for (let i = 0; i < n; i++) {
    alongRe += slope[i] * (re[i] -= meanRe);
    alongIm += slope[i] * (im[i] -= meanIm);
  }
  let energy = 0;
  for (let i = 0; i < n; i++) {
    re[i] -= alongRe * slope[i];
    im[i] -= alongIm * slope[i];
    energy += re[i] * re[i] + im[i] * im[i];
  }
  p.meanRe = originRe + meanRe;
  p.meanIm = originIm + meanIm;
  p.slopeRe = alongRe;
  p.slopeIm = alongIm;
  p.energy = energy;
  p.rawEnergy = energy + alongRe * alongRe + alongIm * alongIm + n * (p.meanRe * p.meanRe + p.meanIm * p.meanIm);
}
