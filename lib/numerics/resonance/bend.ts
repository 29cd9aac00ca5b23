import { BENT_PARAMETERS, bentModel, emptyBentModel } from "@/lib/numerics/resonance/bent-model";
import type { Guess } from "@/lib/numerics/resonance/first-guess";
import type { PreparedSweep } from "@/lib/numerics/resonance/prepare";
import type { Residuals } from "@/lib/numerics/resonance/residuals";
import { inverseColumn, solveCholesky } from "@/lib/numerics/resonance/small-linear";
import type { Readout } from "@/lib/numerics/resonance/types";

export const BENT_SIGMAS = 4;
export const BENT_HALF_WIDTHS = 0.1;
/** One linearised step from the straight fit decides whether the full refit is worth its time. */
export const WORTH_SIGMAS = 2.5;
export const WORTH_HALF_WIDTHS = 0.03;
const MOST_STEPS = 60;

export type Bend = {
  /** Shift of the peak by the amplitude, half-widths; positive for hardening. */
  bend: number;
  bendStd: number;
  evaluations: number;
};

let here = emptyBentModel();
let there = emptyBentModel();
const matrix = new Float64Array(BENT_PARAMETERS ** 2);
const step = new Float64Array(BENT_PARAMETERS);

/**
 * Whether the resonance frequency follows the amplitude: f0 + κ|x|² refitted with f0, Q and κ free.
 *
 * @param straight The fit without κ, and its residuals.
 * @param doubtful Refit in any case, from either side: the residuals of the straight fit are not white.
 * @returns bent: κ differs from 0 at 4 standard errors and shifts the peak by more than 0.1 half-width.
 */
export function isBent(
  p: PreparedSweep,
  readout: Readout,
  { f0, q, residuals }: Guess & { residuals: Residuals },
  doubtful: boolean,
): { bent: boolean; evaluations: number } {
  const { bend, bendVariance, squares } = residuals;
  const std = Math.sqrt((squares / freedomOf(p)) * bendVariance);
  const worth = Math.abs(bend) > WORTH_SIGMAS * std && Math.abs(bend) > WORTH_HALF_WIDTHS;
  let evaluations = 0;
  if (!worth && !doubtful) return { bent: false, evaluations };

  let best: (Bend & { cost: number }) | undefined;
  for (const start of doubtful ? [0, 1.5, -1.5] : [0]) {
    const end = fitBend(p, readout, { f0, q }, start);
    evaluations += end.evaluations;
    if (Number.isFinite(end.cost) && !(best && best.cost <= end.cost)) best = end;
  }
  const bent = best !== undefined && Math.abs(best.bend) > BENT_HALF_WIDTHS && Math.abs(best.bend) > BENT_SIGMAS * best.bendStd;
  return { bent, evaluations };
}

/** Two numbers a point, less f0, Q, κ and the complex a, b and, where the offset has a slope, c. */
function freedomOf(p: PreparedSweep): number {
  return 2 * p.n - (p.slopeNorm > 0 ? 9 : 7);
}

/** Damped Gauss–Newton over (h, ln Q, k) from a straight fit and a first bend. */
function fitBend(p: PreparedSweep, readout: Readout, straight: Guess, start: number): Bend & { cost: number } {
  let { f0, q } = straight;
  let bend = start;
  f0 *= Math.exp(-start / 2 / (2 * q)); // the straight fit sits about half-way up the bend
  let damping = 0;
  let evaluations = 1;
  bentModel(p, readout, f0, q, bend, here);
  while (evaluations < MOST_STEPS && damping < 1e8) {
    matrix.set(here.gram);
    for (let j = 0; j < BENT_PARAMETERS; j++) matrix[(BENT_PARAMETERS + 1) * j] *= 1 + damping;
    step.set(here.gradient);
    if (!solveCholesky(matrix, step, BENT_PARAMETERS)) break;
    const gain = step[0] * here.gradient[0] + step[1] * here.gradient[1] + step[2] * here.gradient[2];
    if (!(gain > 1e-6 * (Math.max(0, here.cost) / (2 * p.n)) + 1e-18 * p.energy)) break;
    const cut = Math.max(1, Math.abs(step[0]), Math.abs(step[1]), Math.abs(step[2]));
    const nextF0 = f0 * Math.exp(step[0] / cut / (2 * q));
    const nextQ = q * Math.exp(step[1] / cut);
    const nextBend = bend + step[2] / cut;
    bentModel(p, readout, nextF0, nextQ, nextBend, there);
    evaluations++;
    if (there.cost < here.cost) {
      f0 = nextF0;
      q = nextQ;
      bend = nextBend;
      [here, there] = [there, here];
      damping = damping < 1e-3 ? 0 : damping / 10;
    } else {
      damping = Math.max(1e-2, damping * 10);
    }
  }
  const variance = Math.max(0, here.cost) / freedomOf(p);
  const perK = inverseColumn(here.gram, 2, BENT_PARAMETERS);
  return { bend, bendStd: perK ? Math.sqrt(variance * perK[2]) : Infinity, cost: here.cost, evaluations };
}
