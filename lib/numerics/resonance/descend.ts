import type { Guess } from "@/lib/numerics/resonance/first-guess";
import type { PreparedSweep } from "@/lib/numerics/resonance/prepare";
import { projectedCost, projectedModel, type ProjectedModel } from "@/lib/numerics/resonance/projected-model";
import type { Readout } from "@/lib/numerics/resonance/types";

const MOST_STEPS = 60;
/** Longest step: in half-widths, and in ln Q. */
const LONGEST_SHIFT = 1.5;
const LONGEST_STRETCH = 1;
/** Done after a step this small against the standard errors (squared), or against a half-width (noise-free data). */
const SMALL_AGAINST_ERROR = 1e-6;
const SMALL_AGAINST_WIDTH = 1e-11;
/** One unit in the last place of f0 is this many half-widths, times Q. */
const F0_ROUNDING = 4 * 2 ** -52;
/** Costs this close, against the energy of the data, differ by rounding only. */
const ROUNDING = 1e-14;

/**
 * Least squares over (ln f0, ln Q) from a first guess: Gauss–Newton on the projected problem, damped after Levenberg
 * and Marquardt whenever a step does not lower the cost.
 *
 * @param models Two workspaces; the first holds the model at the solution afterwards.
 * @returns Where it ended and whether it settled there; settled is false too when it ran out of any sensible range.
 */
export function descend(
  p: PreparedSweep,
  readout: Readout,
  start: Guess,
  models: [ProjectedModel, ProjectedModel],
): Guess & { settled: boolean; evaluations: number } {
  const freedom = Math.max(1, 2 * p.n - 8);
  let [here, there] = models;
  let { f0, q } = start;
  let damping = 0;
  projectedModel(p, readout, f0, q, here);
  let evaluations = 1;
  let settled = false;

  while (evaluations < MOST_STEPS && Number.isFinite(here.cost)) {
    const hh = here.hh * (1 + damping);
    const qq = here.qq * (1 + damping);
    const determinant = hh * qq - here.hq * here.hq;
    let shift = (qq * here.gradientH - here.hq * here.gradientQ) / determinant;
    let stretch = (hh * here.gradientQ - here.hq * here.gradientH) / determinant;
    const gain = shift * here.gradientH + stretch * here.gradientQ;
    if (!Number.isFinite(gain)) break;
    const small =
      gain <= (SMALL_AGAINST_ERROR * Math.max(0, here.cost)) / freedom ||
      (Math.abs(shift) < SMALL_AGAINST_WIDTH + F0_ROUNDING * q && Math.abs(stretch) < SMALL_AGAINST_WIDTH);
    if (small && damping <= 1) {
      f0 *= Math.exp(shift / (2 * q));
      q *= Math.exp(stretch);
      projectedCost(p, readout, f0, q, here);
      evaluations++;
      settled = true;
      break;
    }
    const cut = Math.max(1, Math.abs(shift) / LONGEST_SHIFT, Math.abs(stretch) / LONGEST_STRETCH);
    shift /= cut;
    stretch /= cut;
    const nextF0 = f0 * Math.exp(shift / (2 * q));
    const nextQ = q * Math.exp(stretch);
    projectedModel(p, readout, nextF0, nextQ, there);
    evaluations++;
    if (there.cost <= here.cost + ROUNDING * p.energy) {
      f0 = nextF0;
      q = nextQ;
      [here, there] = [there, here];
      damping = damping < 1e-3 ? 0 : damping / 10;
    } else if (damping > 1e8) {
      break;
    } else {
      damping = Math.max(1e-2, damping * 10);
    }
  }
  models[0] = here;
  models[1] = there;
  const span = p.high - p.low;
  const sensible = f0 > p.low - span && f0 < p.high + span && q > 0.05 && q < (100 * p.n * p.high) / span;
  return { f0, q, settled: settled && sensible, evaluations };
}
