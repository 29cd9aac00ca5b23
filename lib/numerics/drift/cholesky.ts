/**
 * Cholesky factor L of a symmetric positive definite matrix, L Lᵀ = A, over the lower triangle of A itself.
 *
 * @param a Rows of A one after another; only the lower triangle is read and written.
 * @returns Natural logarithm of the determinant of A.
 * @throws RangeError if A is not positive definite.
 *
 * Source: G. H. Golub and C. F. Van Loan, Matrix Computations, section 4.2.
 */
export function choleskyInPlace(a: Float64Array, size: number): number {
  let logDeterminant = 0;
  for (let i = 0; i < size; i++) {
    const row = i * size;
    for (let j = 0; j <= i; j++) {
      const other = j * size;
      let sum = a[row + j];
      for (let k = 0; k < j; k++) sum -= a[row + k] * a[other + k];
      if (j < i) {
        a[row + j] = sum / a[other + j];
        continue;
      }
      if (!(sum > 0)) throw new RangeError("the matrix is not positive definite");
      a[row + i] = Math.sqrt(sum);
      logDeterminant += Math.log(sum);
    }
  }
  return logDeterminant;
}

/** Solves L z = b for a lower triangular L from `choleskyInPlace`, over b, which is returned. */
export function solveLowerInPlace(l: Float64Array, b: Float64Array): Float64Array {
  const size = b.length;
  for (let i = 0; i < size; i++) {
    let sum = b[i];
    for (let k = 0; k < i; k++) sum -= l[i * size + k] * b[k];
    b[i] = sum / l[i * size + i];
  }
  return b;
}

/** Inverse of A, all of it, from its factor L from `choleskyInPlace`, which is overwritten. */
export function inverseFromCholesky(l: Float64Array, size: number): Float64Array {
  // L⁻¹ over L, by columns of the lower triangle.
  for (let j = 0; j < size; j++) {
    l[j * size + j] = 1 / l[j * size + j];
    for (let i = j + 1; i < size; i++) {
      let sum = 0;
      for (let k = j; k < i; k++) sum += l[i * size + k] * l[k * size + j];
      l[i * size + j] = -sum / l[i * size + i];
    }
  }
  const inverse = new Float64Array(size * size);
  for (let k = 0; k < size; k++) {
    const row = k * size;
    for (let i = 0; i <= k; i++) {
      for (let j = 0; j <= i; j++) inverse[i * size + j] += l[row + i] * l[row + j];
    }
  }
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < i; j++) inverse[j * size + i] = inverse[i * size + j];
  }
  return inverse;
}
