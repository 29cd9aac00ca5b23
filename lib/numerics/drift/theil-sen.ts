import { blockMeans } from "@/lib/numerics/drift/block-means";
import { kendallVariance } from "@/lib/numerics/drift/mann-kendall";
import { orderStatistic } from "@/lib/numerics/drift/order-statistic";
import { median } from "@/lib/numerics/statistics/median";
import { normalQuantile } from "@/lib/numerics/statistics/distributions";

/** Values up to which every pair is compared: 12.5 million slopes. */
const mostValues = 5000;

export type TheilSenLine = {
  slope: number;
  intercept: number;
  lower: number;
  upper: number;
  n: number;
  /** Adjacent values averaged into one before pairs were formed; 1 unless there were more than 5 000. */
  blockLength: number;
};

/**
 * Theil–Sen line: the median of the slopes of all pairs, hardly moved by single wild values, with Kendall's interval.
 *
 *   C = z √var S; the limits are the ordered slopes of rank (N − C)/2 and (N + C)/2 + 1, counted from 1, of N pairs
 *
 * Rank convention: `interpolated` (Gilbert 1987, the default) interpolates between the ordered slopes; `rounded` (Sen
 * 1968) takes the ranks round((N − C)/2) and round((N + C)/2) + 1. The two give different limits.
 *
 * @param x Times, say; all finite. Pairs of equal x have no slope and are passed over.
 * @param y Values, one per x, all finite.
 * @param confidence Probability of the interval, between 0 and 1; 0.95 by default.
 * @returns Slope and limits in units of y per x, intercept = median y − slope · median x. With more than 5 000 values
 *   pairs are formed of block means, `n` of them. Undefined below three values.
 * @throws RangeError if lengths differ, all x are equal, or a value is not finite.
 *
 * The interval assumes values without memory about the line. Quadratic in time and memory, up to 100 MB.
 * Source: P. K. Sen, J. Am. Stat. Assoc. 63 (1968) 1379; R. O. Gilbert, Statistical Methods for Environmental Pollution
 * Monitoring (1987), section 16.5; USEPA Unified Guidance (2009), section 17.3.3.
 */
export function theilSen({
  x,
  y,
  confidence = 0.95,
  ranks = "interpolated",
}: {
  x: Float64Array;
  y: Float64Array;
  confidence?: number;
  ranks?: "interpolated" | "rounded";
}): TheilSenLine | undefined {
  if (x.length !== y.length) throw new RangeError("x and y must be equally long");
  if (!x.every(Number.isFinite) || !y.every(Number.isFinite)) throw new RangeError("a value is not finite");
  if (x.length < 3) return undefined;

  const blocks = blockMeans({ x, y }, mostValues);
  const slopes = pairSlopes(blocks);
  const pairs = slopes.length;
  if (pairs === 0) throw new RangeError("all x are equal");
  const c = normalQuantile((1 + confidence) / 2) * Math.sqrt(kendallVariance(blocks.y));
  const ranked = (rank: number) => atRank(slopes, ranks === "rounded" ? Math.round(rank) : rank);

  const slope = atRank(slopes, (pairs + 1) / 2);
  return {
    slope,
    intercept: median(blocks.y) - slope * median(blocks.x),
    lower: ranked((pairs - c) / 2),
    upper: ranked((pairs + c) / 2 + 1),
    n: blocks.x.length,
    blockLength: blocks.blockLength,
  };
}

function pairSlopes({ x, y }: { x: Float64Array; y: Float64Array }): Float64Array {
  const slopes = new Float64Array((x.length * (x.length - 1)) / 2);
  let count = 0;
  for (let i = 0; i < x.length; i++) {
    for (let j = i + 1; j < x.length; j++) {
      if (x[j] !== x[i]) slopes[count++] = (y[j] - y[i]) / (x[j] - x[i]);
    }
  }
  return slopes.subarray(0, count);
}

/** Ordered slope of a rank counted from 1, interpolated between whole ranks and kept within the slopes there are. */
function atRank(slopes: Float64Array, rank: number): number {
  const index = Math.min(Math.max(rank - 1, 0), slopes.length - 1);
  const below = Math.floor(index);
  const low = orderStatistic(slopes, below);
  if (index === below) return low;
  return low + (index - below) * (orderStatistic(slopes, below + 1) - low);
}
