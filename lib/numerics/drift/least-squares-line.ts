import { studentTQuantile } from "@/lib/numerics/statistics/distributions";

export type LeastSquaresLine = {
  slope: number;
  intercept: number;
  slopeError: number;
  interceptError: number;
  lower: number;
  upper: number;
  residualSd: number;
  n: number;
};

/**
 * Straight line y = a + b x by least squares, with standard errors from the scatter about it and Student's interval of
 * the slope. It holds for residuals without memory; for drift under flicker or random walk see `glsLine`.
 *
 * @param x All finite, not all equal.
 * @param y Values, one per x, all finite.
 * @param u Standard uncertainties of the values, > 0, in the unit of y. They weigh as 1/u²; only their ratios count,
 *   and `residualSd` is then relative to u.
 * @param confidence Probability of the interval, between 0 and 1; 0.95 by default.
 * @returns Slope with error and interval in units of y per x, intercept at x = 0. Undefined below three values.
 * @throws RangeError if lengths differ, all x are equal, a value is not finite or a u not above 0.
 *
 * Source: NIST/SEMATECH e-Handbook of Statistical Methods, section 4.4.3; checked on NIST StRD Norris.
 */
export function leastSquaresLine({
  x,
  y,
  u,
  confidence = 0.95,
}: {
  x: Float64Array;
  y: Float64Array;
  u?: Float64Array;
  confidence?: number;
}): LeastSquaresLine | undefined {
  const n = x.length;
  if (y.length !== n || (u && u.length !== n)) throw new RangeError("x, y and u must be equally long");
  if (n < 3) return undefined;
  const weights = u ? u.map(weightOf) : new Float64Array(n).fill(1);

  let total = 0;
  let meanX = 0; // less the first value of each, which keeps digits when the offset is large
  let meanY = 0;
  for (let i = 0; i < n; i++) {
    total += weights[i];
    meanX += weights[i] * (x[i] - x[0]);
    meanY += weights[i] * (y[i] - y[0]);
  }
  meanX /= total;
  meanY /= total;

  let xx = 0;
  let xy = 0;
  for (let i = 0; i < n; i++) {
    const dx = x[i] - x[0] - meanX;
    xx += weights[i] * dx ** 2;
    xy += weights[i] * dx * (y[i] - y[0] - meanY);
  }
  if (!Number.isFinite(xx) || !Number.isFinite(xy)) throw new RangeError("a value is not finite");
  if (xx === 0) throw new RangeError("all x are equal");
  const slope = xy / xx;

  let squares = 0;
  for (let i = 0; i < n; i++) squares += weights[i] * (y[i] - y[0] - meanY - slope * (x[i] - x[0] - meanX)) ** 2;
  const residualSd = Math.sqrt(squares / (n - 2));
  const slopeError = residualSd / Math.sqrt(xx);
  const centreX = x[0] + meanX;
  const t = studentTQuantile((1 + confidence) / 2, n - 2);
  return {
    slope,
    intercept: y[0] + meanY - slope * centreX,
    slopeError,
    interceptError: residualSd * Math.sqrt(1 / total + centreX ** 2 / xx),
    lower: slope - t * slopeError,
    upper: slope + t * slopeError,
    residualSd,
    n,
  };
}

function weightOf(u: number): number {
  if (!(u > 0 && u < Infinity)) throw new RangeError(`a standard uncertainty must be above 0, got ${u}`);
  return 1 / u ** 2;
}
