import { determinant, inverse, Matrix } from "ml-matrix";
import { choleskyInPlace, inverseFromCholesky } from "@/lib/numerics/drift/cholesky";
import { differenceCovariance, type DifferencedSeries } from "@/lib/numerics/drift/differenced-series";

/**
 * Differences of a series under one noise exponent, with what a generalised least-squares fit has taken off so far.
 * With P the inverse covariance and Q = P − Σ g gᵀ after the columns added, `residual` is Q z, `diagonal` that of Q and
 * `squares` zᵀ Q z, the weighted sum of squared residuals.
 */
export type WhitenedSeries = {
  inverse: Float64Array;
  logDeterminant: number;
  values: Float64Array;
  directions: Float64Array[];
  residual: Float64Array;
  diagonal: Float64Array;
  squares: number;
};

/** The series under noise of exponent α from 0 to −2, its slope already taken off. Cubic in the number of values. */
export function whitenedSeries(alpha: number, { dx, dy, grid }: DifferencedSeries): WhitenedSeries {
  const size = dx.length;
  const covariance = differenceCovariance(alpha, grid);
  const logDeterminant = choleskyInPlace(covariance, size);
  const inverse = inverseFromCholesky(covariance, size);
  const residual = times(inverse, dy);
  const diagonal = dy.map((_, i) => inverse[i * size + i]);
  const whitened = { inverse, logDeterminant, values: dy, directions: [], residual, diagonal, squares: dot(dy, residual) };
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

/**
 * Coefficients of all columns together, averaged over the models with restricted-likelihood weights; the variances hold
 * the spread between models. The models' own columns do not matter, only their values and covariance.
 */
export function jointFit(
  models: readonly WhitenedSeries[],
  columns: readonly Float64Array[],
): { coefficients: number[]; variances: number[] } {
  const fits = models.map((model) => fitOf(model, columns));
  const best = Math.max(...fits.map(({ logLikelihood }) => logLikelihood));
  const weights = fits.map(({ logLikelihood }) => (logLikelihood === best ? 1 : Math.exp(logLikelihood - best)));
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  const average = (of: (fit: (typeof fits)[number]) => number) =>
    fits.reduce((sum, fit, i) => sum + (weights[i] / total) * of(fit), 0);

  const coefficients = columns.map((_, j) => average((fit) => fit.coefficients[j]));
  const variances = columns.map((_, j) =>
    average((fit) => fit.variances[j] + (fit.coefficients[j] - coefficients[j]) ** 2),
  );
  return { coefficients, variances };
}

function fitOf(model: WhitenedSeries, columns: readonly Float64Array[]) {
  const weighted = columns.map((column) => times(model.inverse, column));
  const information = new Matrix(columns.map((column) => weighted.map((other) => dot(column, other))));
  const covariance = inverse(information);
  const projections = Matrix.columnVector(weighted.map((column) => dot(column, model.values)));
  const coefficients = covariance.mmul(projections).to1DArray();

  const residual = model.values.map((value, i) => columns.reduce((left, column, j) => left - coefficients[j] * column[i], value));
  const dof = residual.length - columns.length;
  const variance = dot(residual, times(model.inverse, residual)) / dof;
  const logInformation = Math.log(determinant(information));
  return {
    coefficients,
    variances: covariance.diagonal().map((value) => value * variance),
    logLikelihood: -(dof * Math.log(variance) + model.logDeterminant + logInformation) / 2,
  };
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
