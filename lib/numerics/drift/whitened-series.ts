import { choleskyInPlace, inverseFromCholesky } from "@/lib/numerics/drift/cholesky";
import { differenceCovariance, type DifferencedSeries, type NoiseKind } from "@/lib/numerics/drift/differenced-series";

/**
 * Differences of a series under one kind of noise, with what a generalised least-squares fit has taken off so far.
 * With P the inverse covariance and Q = P − Σ g gᵀ after the columns added, `residual` is Q z, `diagonal` that of Q and
 * `squares` zᵀ Q z, the weighted sum of squared residuals.
 */
export type WhitenedSeries = {
  inverse: Float64Array;
  logDeterminant: number;
  logPrior: number;
  values: Float64Array;
  directions: Float64Array[];
  residual: Float64Array;
  diagonal: Float64Array;
  squares: number;
};

/** The series under a kind of noise, its slope already taken off. Cubic in the number of values. */
export function whitenedSeries(kind: NoiseKind, { dx, dy, grid }: DifferencedSeries): WhitenedSeries {
  const size = dx.length;
  const covariance = differenceCovariance(kind, grid);
  const logDeterminant = choleskyInPlace(covariance, size);
  const inverse = inverseFromCholesky(covariance, size);
  const residual = times(inverse, dy);
  const diagonal = dy.map((_, i) => inverse[i * size + i]);
  const whitened = { inverse, logDeterminant, logPrior: Math.log(kind.prior), values: dy, directions: [], residual, diagonal, squares: dot(dy, residual) };
  addColumn(whitened, dx);
  return whitened;
}

/** Adds a column to the fit: updates Q z, the diagonal and the squares in place. Quadratic in the number of values. */
export function addColumn(model: WhitenedSeries, column: Float64Array): void {
  const direction = times(model.inverse, column);
  for (const earlier of model.directions) {
    const share = dot(earlier, column);
    for (let i = 0; i < direction.length; i++) direction[i] -= share * earlier[i];
  }
  const length = Math.sqrt(dot(direction, column));
  const share = dot(direction, model.values) / length;
  for (let i = 0; i < direction.length; i++) {
    direction[i] /= length;
    model.residual[i] -= share * direction[i];
    model.diagonal[i] -= direction[i] ** 2;
  }
  model.squares = Math.max(model.squares - share ** 2, 0);
  model.directions.push(direction);
}

function times(matrix: Float64Array, vector: Float64Array): Float64Array {
  const size = vector.length;
  const product = new Float64Array(size);
  for (let i = 0; i < size; i++) {
    let sum = 0;
    for (let j = 0; j < size; j++) sum += matrix[i * size + j] * vector[j];
    product[i] = sum;
  }
  return product;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i] * b[i];
  return sum;
}
