/** Orthogonal factorisation of a tall matrix: A = Q R, Q as a product of reflections. */
export type Factorisation = {
  /** Reflection k in places k … of its array, scaled so that I − v vᵀ reflects. */
  reflections: readonly Float64Array[];
  /** Upper triangular, rows one after another. */
  r: Float64Array;
};

/**
 * Householder's QR factorisation.
 *
 * @param columns Of A, equally long and at least as long as there are columns; left as they are.
 *
 * Source: G. H. Golub and C. F. Van Loan, Matrix Computations, section 5.2.
 */
export function factorise(columns: readonly Float64Array[]): Factorisation {
  const size = columns.length;
  const work = columns.map((column) => column.slice());
  const r = new Float64Array(size * size);
  work.forEach((v, k) => {
    let squares = 0;
    for (let i = k; i < v.length; i++) squares += v[i] * v[i];
    const diagonal = v[k] > 0 ? -Math.sqrt(squares) : Math.sqrt(squares);
    r[k * size + k] = diagonal;
    for (let i = 0; i < k; i++) r[i * size + k] = v[i];
    const scale = 1 / Math.sqrt(diagonal * (diagonal - v[k]));
    v[k] -= diagonal;
    for (let i = k; i < v.length; i++) v[i] *= scale;
    for (let j = k + 1; j < size; j++) reflect(v, k, work[j]);
  });
  return { reflections: work, r };
}

/** Least-squares solution of A x = y, in one pass. */
export function solve({ reflections, r }: Factorisation, y: Float64Array): Float64Array {
  const size = reflections.length;
  const rotated = y.slice();
  reflections.forEach((v, k) => reflect(v, k, rotated));
  const x = rotated.slice(0, size);
  for (let i = size - 1; i >= 0; i--) {
    for (let j = i + 1; j < size; j++) x[i] -= r[i * size + j] * x[j];
    x[i] /= r[i * size + i];
  }
  return x;
}

/** Inverse of the upper triangle, rows one after another. */
export function inverseOfTriangle(r: Float64Array, size: number): Float64Array {
  const inverse = new Float64Array(size * size);
  for (let j = 0; j < size; j++) {
    inverse[j * size + j] = 1 / r[j * size + j];
    for (let i = j - 1; i >= 0; i--) {
      let sum = 0;
      for (let k = i + 1; k <= j; k++) sum += r[i * size + k] * inverse[k * size + j];
      inverse[i * size + j] = -sum / r[i * size + i];
    }
  }
  return inverse;
}

function reflect(v: Float64Array, from: number, target: Float64Array): void {
  let sum = 0;
  for (let i = from; i < v.length; i++) sum += v[i] * target[i];
  for (let i = from; i < v.length; i++) target[i] -= sum * v[i];
}
