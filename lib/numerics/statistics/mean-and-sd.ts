/**
 * Mean and standard deviation with n − 1, in two passes over the values less the first, which keeps digits when the offset
 * is large; the second pass takes off what rounding left in the mean.
 *
 * @param values All finite.
 * @returns In the unit of the values: mean NaN without values, deviation NaN below two.
 *
 * Source: T. F. Chan, G. H. Golub and R. J. LeVeque, The American Statistician 37 (1983) 242, corrected two-pass
 * algorithm. Checked on NIST StRD.
 */
export function meanAndSd(values: Float64Array): { mean: number; sd: number; squares: number } {
  const n = values.length;
  const first = values[0];
  let sum = 0;
  for (let i = 0; i < n; i++) sum += values[i] - first;
  const middle = sum / n;
  let squares = 0;
  let rest = 0;
  for (let i = 0; i < n; i++) {
    const residual = values[i] - first - middle;
    squares += residual * residual;
    rest += residual;
  }
  squares -= (rest * rest) / n;
  return { mean: n > 0 ? first + (middle + rest / n) : NaN, sd: Math.sqrt(squares / (n - 1)), squares };
}
