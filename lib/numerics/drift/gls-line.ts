import { blockMeans } from "@/lib/numerics/drift/block-means";
import { glsFit } from "@/lib/numerics/drift/gls-fit";
import { differencesWithin, longestWhitened, whiteners } from "@/lib/numerics/drift/whiteners";
import { studentTQuantile } from "@/lib/numerics/statistics/distributions";

export type GlsLine = {
  slope: number;
  /** Standard uncertainty of the slope, the doubt about the kind of noise included. */
  u: number;
  lower: number;
  upper: number;
  intercept: number;
  /** Mean exponent of the noise by restricted likelihood: 0 white, −1 flicker, −2 random walk. */
  alpha: number;
  n: number;
  /** Adjacent values averaged into one first; 1 unless there were more than 300. */
  blockLength: number;
};

/**
 * Straight line by generalised least squares under noise of unknown kind: power laws of exponent α from 0 to −2 in
 * quarters, and white noise on a random walk of six sizes.
 *
 * For each kind k: slope b_k, its variance u_k² and the restricted log-likelihood, with weights w_k ∝ prior · exp(likelihood).
 * Then
 *
 *   b = Σ w b_k, u² = Σ w (u_k² + (b_k − b)²)
 *
 * Work is on the differences of adjacent values, for which the noise is stationary down to α = −2 and the level drops
 * out. Times are taken on a grid of their median spacing for the noise, so holes are holes; the line keeps the times
 * as they are.
 *
 * @param x Times, rising, all finite.
 * @param y Values, one per x, all finite.
 * @param confidence Probability of the interval (Student's, n − 2 degrees of freedom), between 0 and 1; 0.95 by default.
 * @returns Slope, u and limits in units of y per x; the line passes through the means, `intercept` at x = 0. With more
 *   than 300 values it is fitted to block means, `n` of them. Undefined below three values.
 * @throws RangeError if lengths differ, times do not rise, a value is not finite, or the record is longer than 10⁷ of
 *   its median spacings.
 *
 * Source: restricted likelihood, D. A. Harville, J. Am. Stat. Assoc. 72 (1977) 320; power-law covariance, J. R. M.
 * Hosking, Biometrika 68 (1981) 165, of differenced noise. Averaging over kinds is our choice: taking the likeliest alone
 * makes intervals too short for short records.
 */
export function glsLine({
  x,
  y,
  confidence = 0.95,
}: {
  x: Float64Array;
  y: Float64Array;
  confidence?: number;
}): GlsLine | undefined {
  if (x.length !== y.length) throw new RangeError("x and y must be equally long");
  if (!x.every(Number.isFinite) || !y.every(Number.isFinite)) throw new RangeError("a value is not finite");
  if (x.length < 3) return undefined;

  const blocks = blockMeans({ x, y }, longestWhitened);
  const n = blocks.x.length;
  const { coefficients, covariance, alpha } = glsFit({
    noise: whiteners([blocks.x]),
    values: differencesWithin([blocks.y]),
    columns: [differencesWithin([blocks.x])],
  });
  const [slope] = coefficients;
  const u = Math.sqrt(covariance[0]);
  const t = studentTQuantile((1 + confidence) / 2, n - 2);
  return {
    slope,
    u,
    lower: slope - t * u,
    upper: slope + t * u,
    intercept: mean(blocks.y) - slope * mean(blocks.x),
    alpha,
    n,
    blockLength: blocks.blockLength,
  };
}

function mean(values: Float64Array): number {
  return values[0] + values.reduce((sum, value) => sum + (value - values[0]), 0) / values.length;
}
