import { factorise, inverseOfTriangle, solve } from "@/lib/numerics/statistics/householder";

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

  const size = columns.length;
  const scales = columns.map((column) => Math.sqrt(column.reduce((sum, value) => sum + value ** 2, 0)));
  const design = columns.map((column, j) => column.map((value) => value / scales[j]));
  const factorisation = factorise(design);
  const { r } = factorisation;
  if (scales.some((_, j) => !(Math.abs(r[j * (size + 1)]) > y.length * Number.EPSILON))) {
    throw new RangeError("the columns depend on each other");
  }

  const scaled = solve(factorisation, y);
  const correction = solve(factorisation, residualsOf(design, scaled, y)); // one step of refinement
  for (let j = 0; j < size; j++) scaled[j] += correction[j];
  const residualSumOfSquares = residualsOf(design, scaled, y).reduce((sum, residual) => sum + residual ** 2, 0);
  const residualSd = Math.sqrt(residualSumOfSquares / dof);

  const covariance = covarianceOf(r, scales, residualSd);
  return {
    coefficients: scaled.map((value, j) => value / scales[j]),
    standardErrors: Float64Array.from(scales, (_, j) => Math.sqrt(covariance[j * (size + 1)])),
    covariance,
    logInformation: scales.reduce((sum, scale, j) => sum + 2 * Math.log(Math.abs(r[j * (size + 1)]) * scale), 0),
    residualSumOfSquares,
    residualSd,
    dof,
  };
}

function residualsOf(design: readonly Float64Array[], coefficients: Float64Array, y: Float64Array): Float64Array {
  const left = y.slice();
  design.forEach((column, j) => {
    for (let i = 0; i < left.length; i++) left[i] -= coefficients[j] * column[i];
  });
  return left;
}

/** σ² (R⁻¹)(R⁻¹)ᵀ, freed of the columns' scales. */
function covarianceOf(r: Float64Array, scales: readonly number[], residualSd: number): Float64Array {
  const size = scales.length;
  const inverse = inverseOfTriangle(r, size);
  return new Float64Array(size * size).map((_, at) => {
    const [i, j] = [Math.floor(at / size), at % size];
    let sum = 0;
    for (let k = Math.max(i, j); k < size; k++) sum += inverse[i * size + k] * inverse[j * size + k];
    return (sum * residualSd ** 2) / (scales[i] * scales[j]);
  });
}
