import { choleskyInPlace, solveLowerInPlace } from "@/lib/numerics/drift/cholesky";
import { differenceCovariance, differencedSeries, exponentOver, noiseKinds, type NoiseKind } from "@/lib/numerics/drift/differenced-series";

/** Values up to which the full covariance of a stretch is used; its cost grows with the cube. */
export const longestWhitened = 300;

/** One kind of noise over stretches whose levels are free and whose noise is taken as independent. */
export type Whitener = {
  /** Exponent that stands for the kind over the longest stretch: 0 white, −1 flicker, −2 random walk. */
  alpha: number;
  /** Weight before the data are seen. */
  prior: number;
  /** Natural logarithm of the determinant of the covariance, in units of the variance over one grid step. */
  logDeterminant: number;
  /** Differences of adjacent values, stretch after stretch, made independent with equal variance. */
  whiten: (differences: Float64Array) => Float64Array;
};

/** Differences of adjacent values inside each stretch, one stretch after the other. */
export function differencesWithin(stretches: readonly Float64Array[]): Float64Array {
  return Float64Array.from(stretches.flatMap((values) => [...values.subarray(1).map((value, i) => value - values[i])]));
}

/**
 * Whiteners of a series for every kind of noise averaged over.
 *
 * @param times Of each stretch, rising; stretches of one value carry nothing and are passed over by the differences.
 *   Each is at most 300 long for a tolerable cost, which grows with its cube.
 * @throws RangeError if times do not rise, or a stretch is longer than 10⁷ of its median spacings.
 */
export function whiteners(times: readonly Float64Array[]): Whitener[] {
  const grids = times.filter(({ length }) => length > 1).map((x) => differencedSeries({ x, y: x }).grid);
  const longest = grids.reduce((most, grid) => Math.max(most, grid[grid.length - 1]), 1);
  return noiseKinds.map((kind) => {
    let logDeterminant = 0;
    const known = new Map<string, { factor: Float64Array; log: number }>(); // phases of one protocol have one grid
    const factors = grids.map((grid) => {
      const key = grid.join();
      const { factor, log } = known.get(key) ?? factorOf(kind, grid);
      known.set(key, { factor, log });
      logDeterminant += log;
      return factor;
    });
    const whiten = (differences: Float64Array): Float64Array => {
      const whitened = differences.slice();
      let start = 0;
      factors.forEach((factor, k) => {
        const size = grids[k].length - 1;
        solveLowerInPlace(factor, whitened.subarray(start, start + size));
        start += size;
      });
      return whitened;
    };
    return { alpha: exponentOver(kind, longest), prior: kind.prior, logDeterminant, whiten };
  });
}

function factorOf(kind: NoiseKind, grid: Float64Array): { factor: Float64Array; log: number } {
  const factor = differenceCovariance(kind, grid);
  const log = choleskyInPlace(factor, grid.length - 1);
  return { factor, log };
}

/**
 * Cuts a series into stretches of nearly equal length, none above 300.
 *
 * @returns Where each begins, and the series' length as the last.
 */
export function stretchBounds(length: number): number[] {
  const count = Math.max(1, Math.ceil(length / longestWhitened));
  return Array.from({ length: count + 1 }, (_, k) => Math.round((k * length) / count));
}

/** The values between each two bounds, sharing memory. */
export function cutAt(bounds: readonly number[], values: Float64Array): Float64Array[] {
  return bounds.slice(1).map((end, k) => values.subarray(bounds[k], end));
}
