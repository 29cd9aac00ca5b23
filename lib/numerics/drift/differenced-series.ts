import { powerLawVariogram } from "@/lib/numerics/drift/power-law-variogram";
import { median } from "@/lib/numerics/statistics/median";

/**
 * Noise S_y(f) ∝ f^α, or white noise (α = 0) with a random walk beside it that has the share `walk` in the variance of one
 * difference of neighbours; `prior` is its weight before the data are seen.
 */
export type NoiseKind = { alpha: number; walk: number; prior: number };

/**
 * Kinds averaged over where the noise is not known: white to random walk in quarters of the exponent, and white noise on a
 * random walk, which no single exponent stands for: it is white from value to value and walks over the record. Those six
 * together weigh as much as one exponent, so that plain white noise is not taken for a walk without need.
 */
export const noiseKinds: readonly NoiseKind[] = [
  ...[0, -0.25, -0.5, -0.75, -1, -1.25, -1.5, -1.75, -2].map((alpha) => ({ alpha, walk: 0, prior: 1 })),
  ...[0.001, 0.004, 0.016, 0.06, 0.25, 0.6].map((walk) => ({ alpha: 0, walk, prior: 1 / 6 })),
];

/** Exponent that stands for a kind over a record of so many steps: between white and walk by their shares in its variance. */
export function exponentOver({ alpha, walk }: NoiseKind, steps: number): number {
  return walk === 0 ? alpha : (-2 * walk * steps) / (1 - walk + walk * steps);
}

/** Longest record in units of its median spacing. */
const longestRecord = 10_000_000;

/** Differences of adjacent times and values, and the place of each value on a grid of the median spacing. */
export type DifferencedSeries = { dx: Float64Array; dy: Float64Array; grid: Float64Array };

/**
 * @param x Times, rising, at least two.
 * @throws RangeError if times do not rise, or the record is longer than 10⁷ of its median spacings.
 */
export function differencedSeries({ x, y }: { x: Float64Array; y: Float64Array }): DifferencedSeries {
  const dx = differences(x);
  if (!dx.every((step) => step > 0)) throw new RangeError("times must rise");
  return { dx, dy: differences(y), grid: gridIndices(x, median(dx)) };
}

/**
 * Covariance of the differences under a kind of noise, in units of its variance over one grid step: lower triangle, rows
 * one after another. Stationary and without the level for every kind.
 */
export function differenceCovariance({ alpha, walk }: NoiseKind, grid: Float64Array): Float64Array {
  const size = grid.length - 1;
  const variogram = powerLawVariogram(alpha, grid[size]);
  if (walk > 0) for (let h = 1; h < variogram.length; h++) variogram[h] += walk * (h - variogram[h]);
  const covariance = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      covariance[i * size + j] =
        (variogram[grid[i + 1] - grid[j]] +
          variogram[Math.abs(grid[i] - grid[j + 1])] -
          variogram[grid[i + 1] - grid[j + 1]] -
          variogram[grid[i] - grid[j]]) /
        2;
    }
  }
  return covariance;
}

/** Whole numbers, strictly rising, nearest to the times in units of their median spacing; from 0. */
function gridIndices(x: Float64Array, spacing: number): Float64Array {
  if ((x[x.length - 1] - x[0]) / spacing > longestRecord) throw new RangeError("the record is too long for its spacing");
  const indices = new Float64Array(x.length);
  for (let i = 1; i < x.length; i++) indices[i] = Math.max(indices[i - 1] + 1, Math.round((x[i] - x[0]) / spacing));
  return indices;
}

function differences(values: Float64Array): Float64Array {
  return values.subarray(1).map((value, i) => value - values[i]);
}
