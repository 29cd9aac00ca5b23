import type { Alpha } from "@/lib/numerics/stability/power-law";

/**
 * What dead time between repeats does to an Allan variance: variance found from m repeats of length τ₀ begun every T,
 * over the variance of the same averaging time without dead time, B₂(r, μ) · B₃(2, m, r, μ) with r = T/τ₀.
 *
 *   F(A) = 2 A^(μ+2) − (A + 1)^(μ+2) − |A − 1|^(μ+2)
 *   B₂ = (1 + F(r)/2) / (2 (1 − 2^μ))
 *   B₃ = ( 2m + m F(mr) − Σ_{n=1}^{m−1} (m − n) (2F(nr) − F((m+n)r) − F((m−n)r)) ) / ( m^(μ+2) (F(r) + 2) )
 *
 * with the limits at μ = 0 (flicker FM). B₂ takes the dead time as one piece, B₃ spreads it between the m repeats.
 *
 * @param alpha Exponent of the noise, 2 to −2; μ = −2 for both phase noises, else −1 − α.
 * @param r Spacing of repeats over the length of one, ≥ 1; 1 without dead time.
 * @param m Averaging factor, a whole number ≥ 1.
 * @returns `b2`, `b3`, and `variance`, their product; divide a variance by it. 1 for white FM whatever the dead time.
 * @throws RangeError for an exponent, ratio or factor out of range.
 *
 * Linear in m. Source: J. A. Barnes and D. W. Allan, Variances based on data with dead time between the measurements,
 * NIST Technical Note 1318 (1990).
 */
export function deadTimeBias({ alpha, r, m }: { alpha: Alpha; r: number; m: number }): {
  b2: number;
  b3: number;
  variance: number;
} {
  if (alpha < -2) throw new RangeError("the Allan statistics do not converge for this noise");
  if (!(r >= 1 && r < Infinity)) throw new RangeError(`the spacing must be at least the length of a repeat, got a ratio of ${r}`);
  if (!Number.isInteger(m) || m < 1) throw new RangeError(`m must be a whole number ≥ 1, got ${m}`);

  const mu = alpha > 0 ? -2 : -1 - alpha;
  const f = (a: number) => 2 * power(a, mu) - power(a + 1, mu) - power(Math.abs(a - 1), mu);
  // At μ = 0, F is −2 everywhere and both ratios are 0/0: their derivatives by μ take over, without the constants.
  const constant = mu === 0 ? 0 : 2;

  const b2 = (constant + f(r)) / (mu === 0 ? -4 * Math.LN2 : 4 * (1 - 2 ** mu));
  let numerator = constant * m + m * f(m * r);
  for (let n = 1; n < m; n++) numerator -= (m - n) * (2 * f(n * r) - f((m + n) * r) - f((m - n) * r));
  const b3 = numerator / (m ** (mu + 2) * (constant + f(r)));
  return { b2, b3, variance: b2 * b3 };
}

/** A^(μ+2), at μ = 0 its derivative by μ; nothing at A = 0. */
function power(a: number, mu: number): number {
  if (a === 0) return 0;
  return mu === 0 ? a ** 2 * Math.log(a) : a ** (mu + 2);
}
