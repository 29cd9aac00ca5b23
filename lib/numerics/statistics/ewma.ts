/** Two-sided, in-control run length of 500 values with known mean and σ (Lucas and Saccucci 1990, Table 3). */
export const returnEwma = { lambda: 0.2, width: 2.962 } as const;

type Ewma = { values: Float64Array; mean: number; sigma: number; lambda?: number; width?: number };

/**
 * Exponentially weighted moving average chart: finds small lasting shifts sooner than single values can.
 *
 *   z[t] = λ x[t] + (1 − λ) z[t−1], z[0] = mean; signal when |z − mean| > L σ √(λ/(2 − λ))
 *
 * The limits are the asymptotic ones, for which the run lengths are tabulated.
 *
 * @param values In order of time, one per phase.
 * @param mean Mean in control, in the unit of the values; known, or from the baseline.
 * @param sigma Standard deviation of one value about it, > 0 (`movingRangeSigma`). Estimated from few references it
 *   gives more false signals than tabulated.
 * @param lambda Weight λ of the newest value, 0 < λ ≤ 1; 0.2 by default.
 * @param width L in standard deviations of z; 2.962 by default.
 * @returns The averages z in the unit of the values, the limits, the index of the first value that signals, and
 *   whether the last one does.
 * @throws RangeError if σ or λ is out of range, or a value is not finite.
 *
 * Source: J. M. Lucas and M. S. Saccucci, Technometrics 32 (1990) 1.
 */
export function ewma({ values, mean, sigma, lambda = returnEwma.lambda, width = returnEwma.width }: Ewma): {
  averages: Float64Array;
  lower: number;
  upper: number;
  firstSignal: number | undefined;
  signals: boolean;
} {
  if (!(sigma > 0)) throw new RangeError(`sigma must be above 0, got ${sigma}`);
  if (!(lambda > 0 && lambda <= 1)) throw new RangeError(`lambda must lie above 0 and up to 1, got ${lambda}`);

  const halfWidth = width * sigma * Math.sqrt(lambda / (2 - lambda));
  const averages = new Float64Array(values.length);
  let z = mean;
  let firstSignal: number | undefined;
  for (let t = 0; t < values.length; t++) {
    z += lambda * (values[t] - z);
    if (!Number.isFinite(z)) throw new RangeError(`value ${t} is not finite`);
    averages[t] = z;
    if (firstSignal === undefined && Math.abs(z - mean) > halfWidth) firstSignal = t;
  }
  const signals = values.length > 0 && Math.abs(z - mean) > halfWidth;
  return { averages, lower: mean - halfWidth, upper: mean + halfWidth, firstSignal, signals };
}
