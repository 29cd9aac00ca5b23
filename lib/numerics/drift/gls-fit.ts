import type { Whitener } from "@/lib/numerics/drift/whiteners";
import { regression, type Regression } from "@/lib/numerics/statistics/regression";

export type GlsFit = {
  coefficients: Float64Array;
  /** Of the coefficients, rows one after another, the doubt about the kind of noise included. */
  covariance: Float64Array;
  /** Mean exponent that stands for the noise, by restricted likelihood: 0 white, −1 flicker, −2 random walk. */
  alpha: number;
  /** The kind of noise with most weight. */
  likeliest: Whitener;
  /**
   * Corrected Akaike criterion; smaller is better. Only fits of the same differences may be compared. With no column it
   * is that of noise alone.
   */
  aicc: number;
  /** Differences less coefficients. */
  dof: number;
};

/** The fit's own unknowns beside the coefficients: variance and kind of the noise. */
const noiseUnknowns = 2;

/**
 * Linear model of a series by generalised least squares under noise of unknown kind (`noiseKinds`).
 *
 * For each kind α the differences are whitened and fitted by ordinary least squares: coefficients b_α, covariance C_α
 * and restricted likelihood, with weights w_α ∝ prior · likelihood. Then
 *
 *   b = Σ w b_α, C = Σ w (C_α + (b_α − b)(b_α − b)ᵀ)
 *   AICc = −2 ln (prior-weighted mean over α of the profile likelihood) + 2k + 2k(k + 1)/(n − k − 1)
 *
 * with n differences and k coefficients, variance, kind of noise and `extraUnknowns`.
 *
 * @param noise From `whiteners` of the same stretches.
 * @param values Differences of adjacent values, all finite (`differencesWithin`); a level of each stretch drops out.
 * @param columns Differences of the model's columns, each as long; none gives the noise alone.
 * @param extraUnknowns Coefficients that were fitted outside, a time constant say; 0 by default.
 * @returns Coefficients in units of the values per unit of each column. `aicc` is infinite when there are too few
 *   differences for it, −∞ when a model fits exactly.
 * @throws RangeError if there are not more differences than columns, or the columns depend on each other.
 *
 * Sources: restricted likelihood, D. A. Harville, J. Am. Stat. Assoc. 72 (1977) 320; criterion, K. P. Burnham and
 * D. R. Anderson, Model Selection and Multimodel Inference, 2nd ed. (2002), section 2.4. Averaging over kinds is our
 * choice: taking the likeliest alone makes intervals too short for short records.
 */
export function glsFit({
  noise,
  values,
  columns,
  extraUnknowns = 0,
}: {
  noise: readonly Whitener[];
  values: Float64Array;
  columns: readonly Float64Array[];
  extraUnknowns?: number;
}): GlsFit {
  const n = values.length;
  const size = columns.length;
  if (n <= size) throw new RangeError("there are too few differences for the coefficients");
  const fits = noise.map((whitener) => fitUnder(whitener, values, columns));
  const weights = likelihoodWeights(fits.map(({ logRestricted }) => logRestricted));
  const average = (of: (fit: Fit) => number) => fits.reduce((sum, fit, i) => sum + (weights[i] === 0 ? 0 : weights[i] * of(fit)), 0);

  const coefficients = Float64Array.from(columns, (_, j) => average(({ line }) => line.coefficients[j]));
  const covariance = new Float64Array(size * size).map((_, at) => {
    const [i, j] = [Math.floor(at / size), at % size];
    return average(({ line }) => line.covariance[at] + (line.coefficients[i] - coefficients[i]) * (line.coefficients[j] - coefficients[j]));
  });
  const k = size + noiseUnknowns + extraUnknowns;
  const penalty = n > k + 1 ? 2 * k + (2 * k * (k + 1)) / (n - k - 1) : Infinity;
  return {
    coefficients,
    covariance,
    alpha: average(({ whitener }) => whitener.alpha),
    likeliest: fits[weights.indexOf(Math.max(...weights))].whitener,
    aicc: penalty - 2 * logMean(fits.map(({ logProfile }) => logProfile)),
    dof: n - size,
  };
}

type Fit = { whitener: Whitener; line: Pick<Regression, "coefficients" | "covariance">; logRestricted: number; logProfile: number };

function fitUnder(whitener: Whitener, values: Float64Array, columns: readonly Float64Array[]): Fit {
  const y = whitener.whiten(values);
  const n = y.length;
  const line =
    columns.length > 0
      ? regression({ columns: columns.map(whitener.whiten), y })
      : { coefficients: new Float64Array(0), covariance: new Float64Array(0), logInformation: 0, residualSumOfSquares: y.reduce((sum, value) => sum + value ** 2, 0) };
  const rounding = y.reduce((sum, value) => sum + value ** 2, 0) * (n * Number.EPSILON) ** 2;
  const squares = line.residualSumOfSquares > rounding ? line.residualSumOfSquares : 0;
  const dof = n - columns.length;
  return {
    whitener,
    line: squares > 0 ? line : { ...line, covariance: new Float64Array(columns.length ** 2) },
    logRestricted: Math.log(whitener.prior) - (dof * Math.log(squares / dof) + whitener.logDeterminant + line.logInformation) / 2,
    logProfile: Math.log(whitener.prior) - (n * Math.log(squares / n) + whitener.logDeterminant) / 2,
  };
}

/** Weights that sum to 1; a fit without any residual takes all. */
function likelihoodWeights(logs: readonly number[]): number[] {
  const most = Math.max(...logs);
  const raw = most === Infinity ? logs.map((_, i) => (i === logs.indexOf(Infinity) ? 1 : 0)) : logs.map((log) => Math.exp(log - most));
  const total = raw.reduce((sum, one) => sum + one, 0);
  return raw.map((one) => one / total);
}

function logMean(logs: readonly number[]): number {
  const most = Math.max(...logs);
  return most === Infinity ? Infinity : most + Math.log(logs.reduce((sum, log) => sum + Math.exp(log - most), 0) / logs.length);
}
