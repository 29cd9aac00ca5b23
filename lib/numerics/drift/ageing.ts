import { leastBetween } from "@/lib/numerics/statistics/least-between";
import { regression } from "@/lib/numerics/statistics/regression";

/** Fewest values with which AICc can tell three coefficients from two. */
const fewestValues = 8;

export type Ageing = {
  /** Value at the first time, and change per e-fold of 1 + t/τ, in the unit of y. */
  a: number;
  b: number;
  /** In the unit of x. */
  tau: number;
  /** AICc of the ageing law less that of the line: below 0 the law is preferred, clearly below −4. */
  aiccDifference: number;
  preferred: "ageing" | "line";
};

/**
 * Logarithmic ageing against a straight drift: y = a + b ln(1 + t/τ) with t from the first time, or y = a + b t,
 * compared by the corrected Akaike criterion
 *
 *   AICc = n ln(RSS/n) + 2k + 2k(k + 1)/(n − k − 1), k coefficients and the variance
 *
 * τ is sought between a tenth of the mean spacing and ten times the record: beyond, the law is a line.
 *
 * @param x Times, rising, all finite.
 * @param y Values, one per x, all finite.
 * @returns Undefined below eight values, or when one of the two fits exactly.
 * @throws RangeError if lengths differ, a value is not finite or all times are equal.
 *
 * The criterion assumes residuals without memory. Source: K. P. Burnham and D. R. Anderson, Model Selection and
 * Multimodel Inference, 2nd ed. (2002), section 2.4; ageing law as in MIL-PRF-55310.
 */
export function ageing({ x, y }: { x: Float64Array; y: Float64Array }): Ageing | undefined {
  if (x.length !== y.length) throw new RangeError("x and y must be equally long");
  if (!x.every(Number.isFinite) || !y.every(Number.isFinite)) throw new RangeError("a value is not finite");
  const n = x.length;
  if (n < fewestValues) return undefined;

  const t = x.map((time) => time - x[0]);
  const constant = new Float64Array(n).fill(1);
  const offset = y.map((value) => value - y[0]);
  const line = regression({ columns: [constant, t], y: offset });
  const law = (logTau: number) =>
    regression({ columns: [constant, t.map((time) => Math.log1p(time / Math.exp(logTau)))], y: offset });

  const span = t[n - 1];
  const logTau = leastBetween((at) => law(at).residualSumOfSquares, {
    low: Math.log(span / (n - 1) / 10),
    high: Math.log(10 * span),
    gridPoints: 60,
    width: 1e-7,
  });
  const { coefficients, residualSumOfSquares } = law(logTau);
  if (residualSumOfSquares === 0 || line.residualSumOfSquares === 0) return undefined;

  const aiccDifference =
    n * Math.log(residualSumOfSquares / line.residualSumOfSquares) + aiccPenalty(4, n) - aiccPenalty(3, n);
  return {
    a: y[0] + coefficients[0],
    b: coefficients[1],
    tau: Math.exp(logTau),
    aiccDifference,
    preferred: aiccDifference < 0 ? "ageing" : "line",
  };
}

function aiccPenalty(k: number, n: number): number {
  return 2 * k + (2 * k * (k + 1)) / (n - k - 1);
}
