import chiSquaredQuantileOf from "@stdlib/stats-base-dists-chisquare-quantile";
import fCdfOf from "@stdlib/stats-base-dists-f-cdf";
import normalCdfOf from "@stdlib/stats-base-dists-normal-cdf";
import normalQuantileOf from "@stdlib/stats-base-dists-normal-quantile";
import studentTCdfOf from "@stdlib/stats-base-dists-t-cdf";
import studentTQuantileOf from "@stdlib/stats-base-dists-t-quantile";

/** Degrees of freedom above which the package's quantile is up to 0.3 % wrong and the expansion good to 1e-9. */
const largeDof = 1000;

/** x below which a chi-squared variable lies with probability p. `dof` > 0 and finite, not necessarily whole. */
export function chiSquaredQuantile(p: number, dof: number): number {
  checkProbability(p);
  checkDof(dof);
  return dof > largeDof && p > 0 && p < 1 ? largeChiSquaredQuantile(p, dof) : chiSquaredQuantileOf(p, dof);
}

/** t below which Student's t lies with probability p (one-sided: p = 0.975 for a 95 % interval). `dof` > 0 or infinite. */
export function studentTQuantile(p: number, dof: number): number {
  checkProbability(p);
  checkDof(dof);
  return dof === Infinity ? normalQuantileOf(p, 0, 1) : studentTQuantileOf(p, dof);
}

/** Probability that Student's t with `dof` > 0 or infinite lies at or below t. */
export function studentTCdf(t: number, dof: number): number {
  checkDof(dof);
  return dof === Infinity ? normalCdfOf(t, 0, 1) : studentTCdfOf(t, dof);
}

/** z below which a standard normal variable lies with probability p. */
export function normalQuantile(p: number): number {
  checkProbability(p);
  return normalQuantileOf(p, 0, 1);
}

/** Probability that a standard normal variable lies at or below z. */
export function normalCdf(z: number): number {
  return normalCdfOf(z, 0, 1);
}

/** Probability that an F variable, a ratio of variances with these degrees of freedom (both > 0), lies at or below x. */
export function fCdf(x: number, dof: { numerator: number; denominator: number }): number {
  checkDof(dof.numerator);
  checkDof(dof.denominator);
  return fCdfOf(x, dof.numerator, dof.denominator);
}

/** Expansion of E. A. Cornish and R. A. Fisher, Rev. Int. Stat. Inst. 5 (1938) 307, for chi-squared. */
function largeChiSquaredQuantile(p: number, dof: number): number {
  const x = normalQuantileOf(p, 0, 1);
  const root = Math.sqrt(2 * dof);
  return (
    dof +
    root * x +
    (2 / 3) * (x ** 2 - 1) +
    (x ** 3 - 7 * x) / (9 * root) -
    (6 * x ** 4 + 14 * x ** 2 - 32) / (405 * dof) +
    (9 * x ** 5 + 256 * x ** 3 - 433 * x) / (4860 * root * dof) +
    (12 * x ** 6 - 243 * x ** 4 - 923 * x ** 2 + 1472) / (25515 * dof ** 2)
  );
}

function checkProbability(p: number): void {
  if (!(p >= 0 && p <= 1)) throw new RangeError(`a probability lies between 0 and 1, got ${p}`);
}

function checkDof(dof: number): void {
  if (!(dof > 0)) throw new RangeError(`degrees of freedom must be above 0, got ${dof}`);
}
