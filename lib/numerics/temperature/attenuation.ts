import type { JointProblem } from "@/lib/numerics/drift/joint-problem";
import { dot, orthonormal } from "@/lib/numerics/drift/orthonormal";
import type { Whitener } from "@/lib/numerics/drift/whiteners";

/** Values whose weight is computed one by one; of more, evenly chosen ones stand for the rest. */
const mostWeights = 300;

/**
 * Share by which scatter in a regressor makes its coefficient too small: Σ u_i² M_ii / θᵀMθ, with M the weights of the fit
 * after drift and steps have been taken out.
 *
 * @param theta The regressor, one value per time of the problem.
 * @param u Standard uncertainty of each, independent from one to the next.
 * @returns 0 without scatter; near or above 1 the regressor shows little but its own scatter.
 *
 * Source: W. A. Fuller, Measurement Error Models (1987), section 1.1.
 */
export function attenuation({
  problem,
  whitener,
  theta,
  u,
}: {
  problem: JointProblem;
  whitener: Whitener;
  theta: Float64Array;
  u: Float64Array;
}): number {
  const basis = orthonormal(problem.sharedColumns.map(whitener.whiten));
  const leftOf = (series: Float64Array): number => {
    const whitened = whitener.whiten(problem.differences(series));
    return basis.reduce((left, direction) => left - dot(direction, whitened) ** 2, dot(whitened, whitened));
  };
  const stride = Math.ceil(theta.length / mostWeights);
  let scatter = 0;
  for (let i = 0; i < theta.length; i += stride) scatter += stride * u[i] ** 2 * leftOf(new Float64Array(theta.length).fill(1, i, i + 1));
  return scatter / leftOf(theta);
}
