/** Σ cₖ xᵏ by Horner's rule, lowest power first. 0 for no coefficients. */
export function polynomial(coefficients: readonly number[], x: number): number {
  let sum = 0;
  for (let k = coefficients.length - 1; k >= 0; k--) sum = sum * x + coefficients[k];
  return sum;
}
