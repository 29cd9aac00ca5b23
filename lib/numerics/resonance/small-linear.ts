/**
 * Solves the symmetric positive definite system A·x = b in place by Cholesky's method, for a handful of unknowns.
 *
 * @param a Matrix of n rows by n, row by row; its lower triangle becomes the factor.
 * @param b Right-hand side; becomes the solution.
 * @returns false, with a and b spoiled, when A is not positive definite to working precision or not finite.
 */
export function solveCholesky(a: Float64Array, b: Float64Array, n: number): boolean {
  if (!factorCholesky(a, n)) return false;
  forwardSubstitute(a, b, n);
  backSubstitute(a, b, n);
  return true;
}

/** Replaces the lower triangle of a symmetric matrix by its Cholesky factor L; false when it has none. */
export function factorCholesky(a: Float64Array, n: number): boolean {
  for (let j = 0; j < n; j++) {
    const diagonal = a[n * j + j];
    let d = diagonal;
    for (let k = 0; k < j; k++) d -= a[n * j + k] ** 2;
    if (!(d > 1e-14 * diagonal)) return false;
    const root = Math.sqrt(d);
    a[n * j + j] = root;
    for (let i = j + 1; i < n; i++) {
      let v = a[n * i + j];
      for (let k = 0; k < j; k++) v -= a[n * i + k] * a[n * j + k];
      a[n * i + j] = v / root;
    }
  }
  return Number.isFinite(a[n * n - 1]);
}

/** Replaces b by L⁻¹b, L a factor in the lower triangle of `a`; b begins at `offset`. */
export function forwardSubstitute(a: Float64Array, b: Float64Array, n: number, offset = 0): void {
  for (let i = 0; i < n; i++) {
    let v = b[offset + i];
    for (let k = 0; k < i; k++) v -= a[n * i + k] * b[offset + k];
    b[offset + i] = v / a[n * i + i];
  }
}

/** Replaces b by L⁻ᵀb, L a factor in the lower triangle of `a`. */
export function backSubstitute(a: Float64Array, b: Float64Array, n: number): void {
  for (let i = n - 1; i >= 0; i--) {
    let v = b[i];
    for (let k = i + 1; k < n; k++) v -= a[n * k + i] * b[k];
    b[i] = v / a[n * i + i];
  }
}

/**
 * Column `column` of the inverse of a symmetric positive definite matrix, which is left as it is; undefined when it has none.
 */
export function inverseColumn(a: Float64Array, column: number, n: number): Float64Array | undefined {
  const b = new Float64Array(n);
  b[column] = 1;
  return solveCholesky(a.slice(0, n * n), b, n) ? b : undefined;
}
