import { descendExact, exactShapeCovariance } from "@/lib/numerics/resonance/magnitude-exact";
import { emptyMagnitudeModel, explainedPower } from "@/lib/numerics/resonance/magnitude-model";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { noiseOf, scoreOf, weightedLag1, weightsOf, type MagnitudeSolution } from "@/lib/numerics/resonance/magnitude-settle";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { magnitudeTerms, type MagnitudeTerms } from "@/lib/numerics/resonance/magnitude-terms";
import type { Readout } from "@/lib/numerics/resonance/types";

export type Refined = {
  f0: number;
  q: number;
  sigma: number;
  lag1: number;
  /** Of (shift in half-widths, ln Q), in units of 4σ². */
  covariance: { hh: number; hq: number; qq: number };
  terms: MagnitudeTerms;
  evaluations: number;
};

/** Costs this close, against the sum of the weighted squares, differ by rounding only. */
const ROUNDING = 1e-12;
/** The linear form stands where its misfit to the exact oscillator, summed over the sweep, is below this share of a variance. */
const NEGLIGIBLE = 0.01;
/** A set whose score is above that of the linear form by less is the right one, or cannot be told from it. */
const AS_GOOD = 0.5;
const ROUNDS = 4;
const spare = emptyMagnitudeModel(0);
const SAME_NOISE = 1e-3;

/**
 * a, b and c of a settled power fit; and where the sweep is so wide against f0 that the linear form is not exact (low Q), a
 * refit of the oscillator itself.
 */
export function refineExactly(p: MagnitudeSweep, readout: Readout, solution: MagnitudeSolution): Refined | undefined {
  const { f0, q, sigma, model, lag1 } = solution;
  const linear = model.linear.slice();
  linear[2] -= 2 * sigma * sigma;
  const problem = { linear, metric: model.linearGram, tie: 4 * sigma * sigma + ROUNDING * p.energy };
  const [terms] = magnitudeTerms(p, readout, solution, problem);
  const determinant = model.gram[0] * model.gram[4] - model.gram[1] * model.gram[1];
  if (!terms || !(determinant > 0)) return undefined;
  const covariance = { hh: model.gram[4] / determinant, hq: -model.gram[1] / determinant, qq: model.gram[0] / determinant };
  if (misfitOf(p, readout, solution, terms) <= NEGLIGIBLE * 4 * sigma * sigma) return { f0, q, sigma, lag1, covariance, terms, evaluations: 1 };

  let evaluations = 1;
  let best: (Refined & { score: number }) | undefined;
  for (const set of magnitudeTerms(p, readout, solution, problem, true)) {
    const end = settleExactly(p, readout, solution, set);
    evaluations += end.evaluations;
    if (end.refined && !(best && best.score <= end.refined.score)) best = end.refined;
    if (best && best.score < solution.score + AS_GOOD) break;
  }
  return best && { ...best, evaluations };
}

/** What of the exact oscillator the linear form cannot follow at the same f0 and Q: Σ w·difference². */
function misfitOf(p: MagnitudeSweep, readout: Readout, solution: MagnitudeSolution, { a, bRe, bIm, cRe, cIm }: MagnitudeTerms): number {
  const { f0, q, weight, model } = solution;
  const { re, im } = evaluateResonance(p.f, { readout, f0Hz: f0, q, a: { re: a, im: 0 }, b: { re: bRe, im: bIm }, c: { re: cRe, im: cIm } });
  let total = 0;
  for (let i = 0; i < p.n; i++) {
    re[i] = re[i] * re[i] + im[i] * im[i] - model.mean[i]; // which the linear form follows: less of it, for the digits
    total += weight[i] * re[i] * re[i];
  }
  return total - explainedPower({ ...p, power: re }, solution, weight, spare);
}

function settleExactly(
  p: MagnitudeSweep,
  readout: Readout,
  { f0, q, sigma: firstSigma, weight: firstWeight }: MagnitudeSolution,
  terms: MagnitudeTerms,
): { refined?: Refined & { score: number }; evaluations: number } {
  const weight = firstWeight.slice();
  let sigma = firstSigma;
  let evaluations = 0;
  let at = { f0, q, ...terms };
  for (let round = 0; round < ROUNDS; round++) {
    const end = descendExact(p, readout, at, { weight, lift: 2 * sigma * sigma, small: 1e-5 });
    evaluations += end.evaluations;
    const last = sigma;
    sigma = noiseOf(p, end.model.cost);
    at = end.at;
    const done = Math.abs(sigma - last) <= SAME_NOISE * last || round === ROUNDS - 1;
    if (done) {
      const covariance = exactShapeCovariance(p, end.model);
      if (!covariance || !Number.isFinite(sigma)) break;
      const { f0: f, q: width, ...rest } = at;
      const lag1 = weightedLag1(p, end.model.residual, weight);
      return { refined: { f0: f, q: width, sigma, lag1, covariance, terms: rest, score: scoreOf(p, weight, sigma), evaluations }, evaluations };
    }
    weightsOf(p, end.model.mean, sigma, weight);
  }
  return { evaluations };
}
