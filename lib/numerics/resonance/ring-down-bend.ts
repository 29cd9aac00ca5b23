import { BENT_HALF_WIDTHS, BENT_SIGMAS, WORTH_HALF_WIDTHS, WORTH_SIGMAS } from "@/lib/numerics/resonance/bend";
import { descendDecay, type DecaySolution } from "@/lib/numerics/resonance/ring-down-descend";
import { DECAY_PARAMETERS } from "@/lib/numerics/resonance/ring-down-model";
import { inverseColumn } from "@/lib/numerics/resonance/small-linear";

/** ω, γ, bend, A, B and the constant. */
const PARAMETERS = 6;

/**
 * Whether the frequency of a decay follows the square of its amplitude; see isBent for the rule and decayModel for the bend.
 *
 * @param doubtful Refit in any case, from either side: the residuals of the straight fit are not white.
 */
export function isDecayBent(y: Float64Array, straight: DecaySolution, doubtful: boolean): { bent: boolean; evaluations: number } {
  const { gram, gradient, squares } = straight.model;
  const freedom = y.length - PARAMETERS;
  const perBend = inverseColumn(gram, 2, DECAY_PARAMETERS);
  const first = perBend ? perBend[0] * gradient[0] + perBend[1] * gradient[1] + perBend[2] * gradient[2] : 0;
  const firstStd = perBend ? Math.sqrt((squares / freedom) * perBend[2]) : Infinity;
  const worth = Math.abs(first) > WORTH_SIGMAS * firstStd && Math.abs(first) > WORTH_HALF_WIDTHS;
  if (!worth && !doubtful) return { bent: false, evaluations: 0 };

  let best: DecaySolution | undefined;
  let evaluations = 0;
  for (const bend of doubtful ? [0, 2, -2] : [0]) {
    // The straight fit follows the mean frequency of the strong part, about half of the shift at the first sample.
    const end = descendDecay(y, { omega: straight.omega - 0.5 * bend * straight.gamma, gamma: straight.gamma, bend }, 3);
    evaluations += end.evaluations;
    if (end.settled && !(best && best.model.squares <= end.model.squares)) best = end;
  }
  if (!best) return { bent: false, evaluations };
  const column = inverseColumn(best.model.gram, 2, DECAY_PARAMETERS);
  const std = column ? Math.sqrt((best.model.squares / freedom) * column[2]) : Infinity;
  return { bent: Math.abs(best.bend) > BENT_HALF_WIDTHS && Math.abs(best.bend) > BENT_SIGMAS * std, evaluations };
}
