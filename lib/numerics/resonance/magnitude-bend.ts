import { BENT_HALF_WIDTHS, BENT_SIGMAS, WORTH_HALF_WIDTHS, WORTH_SIGMAS } from "@/lib/numerics/resonance/bend";
import { descendShape } from "@/lib/numerics/resonance/magnitude-descend";
import { emptyMagnitudeModel, SHAPE_PARAMETERS, type MagnitudeModel } from "@/lib/numerics/resonance/magnitude-model";
import { noiseOf, weightsOf, type MagnitudeSolution } from "@/lib/numerics/resonance/magnitude-settle";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { inverseColumn } from "@/lib/numerics/resonance/small-linear";

/** Refits with the weights of the last bent model. */
const ROUNDS = 3;

/**
 * Whether the resonance frequency follows the amplitude, judged by the power alone; see isBent.
 *
 * @param doubtful Refit in any case, from either side: the residuals of the straight fit are not white.
 */
export function isMagnitudeBent(p: MagnitudeSweep, straight: MagnitudeSolution, doubtful: boolean): { bent: boolean; evaluations: number } {
  const { model, sigma } = straight;
  const perBend = inverseColumn(model.gram, 2, SHAPE_PARAMETERS);
  const first = perBend ? perBend[0] * model.gradient[0] + perBend[1] * model.gradient[1] + perBend[2] * model.gradient[2] : 0;
  const firstStd = perBend ? 2 * sigma * Math.sqrt(perBend[2]) : Infinity;
  const worth = Math.abs(first) > WORTH_SIGMAS * firstStd && Math.abs(first) > WORTH_HALF_WIDTHS;
  if (!worth && !doubtful) return { bent: false, evaluations: 0 };

  const models: [MagnitudeModel, MagnitudeModel] = [emptyMagnitudeModel(p.n), emptyMagnitudeModel(p.n)];
  let evaluations = 0;
  let leastCost = Infinity;
  let bent = false;
  for (const bend of doubtful ? [0, 1.5, -1.5] : [0]) {
    const weight = straight.weight.slice();
    // The straight fit sits about half-way up the bend.
    let end = { ...straight, f0: straight.f0 * Math.exp(-bend / (4 * straight.q)), bend };
    let cost = Infinity;
    for (let round = 0; round < ROUNDS; round++) {
      const next = descendShape(p, end, { weight, free: 3, small: 1e-6 }, models);
      evaluations += next.evaluations;
      end = { ...end, ...next };
      if (round === 0) cost = models[0].cost;
      if (!Number.isFinite(models[0].cost)) break;
      if (round < ROUNDS - 1) weightsOf(p, models[0].mean, noiseOf(p, models[0].cost), weight);
    }
    if (!(cost < leastCost)) continue;
    leastCost = cost;
    const column = inverseColumn(models[0].gram, 2, SHAPE_PARAMETERS);
    const std = column ? 2 * noiseOf(p, models[0].cost) * Math.sqrt(column[2]) : Infinity;
    bent = Math.abs(end.bend) > BENT_HALF_WIDTHS && Math.abs(end.bend) > BENT_SIGMAS * std;
  }
  return { bent, evaluations };
}
