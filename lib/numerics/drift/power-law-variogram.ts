/**
 * Variance of the difference of two values h steps apart, h = 0 … longest, for discrete power-law noise S_y(f) ∝ f^α,
 * in units of that at h = 1.
 *
 *   V(h + 1) − V(h) = γ(0) + 2 Σ_{a=1}^{h} γ(a), γ(a) = γ(a−1) (a − 1 + e)/(a − e), e = −α/2 − 1
 *
 * γ is the autocovariance of the differenced noise: fractional noise of order e.
 *
 * @param alpha Exponent from −2 (random walk, V = h) to 0 (white, V = 1 for every h > 0).
 * @throws RangeError for an exponent outside that range.
 *
 * Source: J. R. M. Hosking, Fractional differencing, Biometrika 68 (1981) 165, theorem 1.
 */
export function powerLawVariogram(alpha: number, longest: number): Float64Array {
  if (!(alpha >= -2 && alpha <= 0)) throw new RangeError(`the exponent must lie between -2 and 0, got ${alpha}`);
  const order = -alpha / 2 - 1;
  const variogram = new Float64Array(longest + 1);
  let increment = 1;
  let covariance = 1;
  for (let h = 1; h <= longest; h++) {
    variogram[h] = variogram[h - 1] + increment;
    covariance *= (h - 1 + order) / (h - order);
    increment += 2 * covariance;
  }
  return variogram;
}
