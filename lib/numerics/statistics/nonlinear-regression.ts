import { regression } from "@/lib/numerics/statistics/regression";

export type NonlinearRegression = {
  parameters: Float64Array;
  standardErrors: Float64Array;
  /** Of the parameters, rows one after another. */
  covariance: Float64Array;
  residualSumOfSquares: number;
  residualSd: number;
  dof: number;
  /** Whether it came to rest; if not, the numbers are where it stood and must not be used. */
  settled: boolean;
};

const mostSteps = 400;
/** Relative step of the central differences: the cube root of the rounding unit. */
const derivativeStep = 6e-6;
/** At rest when the residual's part along the model's tangent is this small against the residual, or it is rounding. */
const atRest = 1e-6;

/**
 * Nonlinear least squares by Levenberg and Marquardt's method with derivatives by central differences, each step solved by
 * QR of the columns scaled to unit length.
 *
 * @param model Fills `out` with the model's values for parameters; not finite where the parameters are impossible.
 * @param y Values, all finite.
 * @param start First guess, one per parameter, none of them 0 unless its own size is about 1.
 * @returns Parameters with standard errors from the residual scatter, in units of y per unit of the model's parameters.
 * @throws RangeError if there are not more values than parameters, or a value or the model at the start is not finite.
 *
 * Source: J. J. Moré, The Levenberg-Marquardt algorithm, Lecture Notes in Mathematics 630 (1978) 105. Checked on NIST StRD.
 */
export function nonlinearRegression({
  model,
  y,
  start,
}: {
  model: (parameters: Float64Array, out: Float64Array) => void;
  y: Float64Array;
  start: Float64Array;
}): NonlinearRegression {
  const [n, size] = [y.length, start.length];
  if (n <= size) throw new RangeError("there must be more values than parameters");
  const residualAt = (parameters: Float64Array): Float64Array => {
    const out = new Float64Array(n);
    model(parameters, out);
    for (let i = 0; i < n; i++) out[i] = y[i] - out[i];
    return out;
  };

  let parameters = start.slice();
  let residual = residualAt(parameters);
  let cost = squaresOf(residual);
  if (!Number.isFinite(cost)) throw new RangeError("a value, or the model at the first guess, is not finite");
  let damping = 1e-3;
  let settled = false;
  for (let step = 0; step < mostSteps && !settled && damping < 1e16; step++) {
    const columns = tangent(model, parameters, n);
    const plain = solved(columns, residual, 0);
    settled = plain !== undefined && gainOf(columns, plain) <= atRest ** 2 * cost + Number.EPSILON ** 2 * squaresOf(y);
    while (damping < 1e16) {
      const move = solved(columns, residual, damping);
      const next = move && parameters.map((value, j) => value + move[j]);
      const trial = next && residualAt(next);
      const trialCost = trial ? squaresOf(trial) : Infinity;
      if (next && trial && trialCost <= cost) {
        [parameters, residual, cost] = [next, trial, trialCost];
        damping = Math.max(damping / 10, 1e-15);
        break;
      }
      if (settled) break;
      damping *= 5;
    }
  }

  const dof = n - size;
  const residualSd = Math.sqrt(cost / dof);
  const covariance = settled ? regression({ columns: tangent(model, parameters, n), y: residual }).covariance : new Float64Array(size * size).fill(NaN);
  return {
    parameters,
    standardErrors: parameters.map((_, j) => Math.sqrt(covariance[j * (size + 1)])),
    covariance,
    residualSumOfSquares: cost,
    residualSd,
    dof,
    settled,
  };
}

/** Derivatives of the model by each parameter. */
function tangent(model: (parameters: Float64Array, out: Float64Array) => void, parameters: Float64Array, n: number): Float64Array[] {
  return Array.from(parameters, (value, j) => {
    const step = derivativeStep * (Math.abs(value) || 1);
    const [below, above] = [new Float64Array(n), new Float64Array(n)];
    model(parameters.with(j, value - step), below);
    model(parameters.with(j, value + step), above);
    const width = value + step - (value - step);
    return above.map((one, i) => (one - below[i]) / width);
  });
}

/** Step of damped least squares, each column's damping in proportion to its length; undefined where it cannot be had. */
function solved(columns: readonly Float64Array[], residual: Float64Array, damping: number): Float64Array | undefined {
  const n = residual.length;
  const size = columns.length;
  const augmented = columns.map((column, j) => {
    const longer = new Float64Array(n + size);
    longer.set(column);
    longer[n + j] = Math.sqrt(damping * squaresOf(column));
    return longer;
  });
  const target = new Float64Array(n + size);
  target.set(residual);
  try {
    const { coefficients } = regression({ columns: augmented, y: target });
    return coefficients.every(Number.isFinite) ? coefficients : undefined;
  } catch (error) {
    if (error instanceof RangeError) return undefined; // columns that depend on each other here
    throw error;
  }
}

/** Square of what a full step takes off the residual to first order. */
function gainOf(columns: readonly Float64Array[], move: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < columns[0].length; i++) sum += columns.reduce((one, column, j) => one + column[i] * move[j], 0) ** 2;
  return sum;
}

function squaresOf(values: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i] * values[i];
  return sum;
}
