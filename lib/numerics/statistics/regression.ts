import { Matrix, QrDecomposition, inverse } from "ml-matrix";

export type Regression = {
  coefficients: Float64Array;
  standardErrors: Float64Array;
  /** Of the coefficients, rows one after another; scaled by the residual variance. */
  covariance: Float64Array;
  /** Natural logarithm of the determinant of XᵀX. */
  logInformation: number;
  /** Sum of squared residuals, in the unit of y squared. */
  residualSumOfSquares: number;
  residualSd: number;
  dof: number;
};

/**
 * Linear least squares y = X b by Householder QR of the columns scaled to unit length.
 *
 * @param columns The columns of X, each as long as y, a column of ones included where a constant is wanted. Scaling
 *   makes units harmless; columns that depend on each other are an error.
 * @param y Values, all finite.
 * @returns Coefficients and standard errors per column, in units of y per unit of the column; errors are NaN when
 *   there are as many columns as values.
 * @throws RangeError if lengths differ, there are fewer values than columns, or the columns depend on each other.
 *
 * Source: Å. Björck, Numerical Methods for Least Squares Problems (1996), section 2.4. Checked on NIST StRD.
 */
export function regression({ columns, y }: { columns: readonly Float64Array[]; y: Float64Array }): Regression {
  const dof = y.length - columns.length;
  if (dof < 0) throw new RangeError("there are fewer values than coefficients");
  if (columns.some((column) => column.length !== y.length)) throw new RangeError("columns and values must be equally long");

  const scales = columns.map((column) => Math.sqrt(column.reduce((sum, value) => sum + value ** 2, 0)));
  const design = new Matrix(y.length, columns.length);
  columns.forEach((column, j) => column.forEach((value, i) => design.set(i, j, value / scales[j])));
  const qr = new QrDecomposition(design);
  const r = qr.upperTriangularMatrix;
  if (r.diagonal().some((value) => !(Math.abs(value) > y.length * Number.EPSILON))) {
    throw new RangeError("the columns depend on each other");
  }

  const target = Matrix.columnVector(y);
  const scaled = qr.solve(target);
  const residuals = Matrix.sub(target, design.mmul(scaled));
  scaled.add(qr.solve(residuals)); // one step of refinement
  const left = Matrix.sub(target, design.mmul(scaled)).to1DArray();
  const residualSumOfSquares = left.reduce((sum, residual) => sum + residual ** 2, 0);
  const residualSd = Math.sqrt(residualSumOfSquares / dof);

  const size = columns.length;
  const rInverse = inverse(r);
  const cofactors = rInverse.mmul(rInverse.transpose());
  const covariance = new Float64Array(size * size);
  for (let i = 0; i < size; i++) {
    for (let j = 0; j < size; j++) covariance[i * size + j] = (cofactors.get(i, j) * residualSd ** 2) / (scales[i] * scales[j]);
  }
  return {
    coefficients: Float64Array.from(scales, (scale, j) => scaled.get(j, 0) / scale),
    standardErrors: Float64Array.from(scales, (scale, j) => (residualSd * Math.hypot(...rInverse.getRow(j))) / scale),
    covariance,
    logInformation: scales.reduce((sum, scale, j) => sum + 2 * Math.log(Math.abs(r.get(j, j)) * scale), 0),
    residualSumOfSquares,
    residualSd,
    dof,
  };
}
