import { magnitudeModel, SHAPE_PARAMETERS, type MagnitudeModel, type Shape } from "@/lib/numerics/resonance/magnitude-model";
import type { MagnitudeSweep } from "@/lib/numerics/resonance/magnitude-sweep";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";

const MOST_STEPS = 60;
/** Longest step: in half-widths, in ln Q and in bend. */
const LONGEST = [1.5, 1, 1];
/** Done after a step this small against a half-width, for data without noise. */
const SMALL_AGAINST_WIDTH = 1e-11;
/** One unit in the last place of f0 is this many half-widths, times Q. */
const F0_ROUNDING = 4 * 2 ** -52;

const matrix = new Float64Array(SHAPE_PARAMETERS ** 2);
const step = new Float64Array(SHAPE_PARAMETERS);

/**
 * Least squares over the shape at fixed weights: Gauss–Newton on the projected problem, damped after Levenberg and Marquardt
 * whenever a step does not lower the cost.
 *
 * @param free 2 for a straight oscillator, 3 to let it bend.
 * @param small Done when a step promises less than this share of a variance.
 * @param models Two workspaces; the first holds the model at the solution afterwards.
 */
export function descendShape(
  p: MagnitudeSweep,
  start: Shape,
  { weight, free, small }: { weight: Float64Array; free: 2 | 3; small: number },
  models: [MagnitudeModel, MagnitudeModel],
): Shape & { settled: boolean; evaluations: number } {
  let [here, there] = models;
  let at = start;
  let damping = 0;
  let settled = false;
  let evaluations = 1;
  let sound = magnitudeModel(p, at, weight, here);
  while (sound && evaluations < MOST_STEPS && damping < 1e8) {
    for (let j = 0; j < free; j++) {
      for (let l = 0; l < free; l++) matrix[free * j + l] = here.gram[SHAPE_PARAMETERS * j + l] * (j === l ? 1 + damping : 1);
      step[j] = here.gradient[j];
    }
    if (!solveCholesky(matrix, step, free)) break;
    let gain = 0;
    let cut = 1;
    for (let j = 0; j < free; j++) {
      gain += step[j] * here.gradient[j];
      cut = Math.max(cut, Math.abs(step[j]) / LONGEST[j]);
    }
    if (!Number.isFinite(gain)) break;
    const bendStep = free > 2 ? step[2] / cut : 0;
    const tiny = Math.abs(step[0]) < SMALL_AGAINST_WIDTH + F0_ROUNDING * at.q && Math.abs(step[1]) < SMALL_AGAINST_WIDTH && Math.abs(bendStep) < SMALL_AGAINST_WIDTH;
    if (damping <= 1 && (tiny || gain <= (small * here.cost) / p.n)) {
      settled = true;
      break;
    }
    const next = { f0: at.f0 * Math.exp(step[0] / cut / (2 * at.q)), q: at.q * Math.exp(step[1] / cut), bend: at.bend + bendStep };
    const better = magnitudeModel(p, next, weight, there) && there.cost < here.cost;
    evaluations++;
    if (better) {
      at = next;
      [here, there] = [there, here];
      damping = damping < 1e-3 ? 0 : damping / 10;
    } else if (tiny) {
      settled = true; // the last digits
      break;
    } else {
      damping = Math.max(1e-2, damping * 10);
    }
    sound = sensible(p, at);
  }
  models[0] = here;
  models[1] = there;
  return { ...at, settled: settled && sound, evaluations };
}

function sensible({ n, low, high }: MagnitudeSweep, { f0, q }: Shape): boolean {
  const span = high - low;
  return f0 > low - span && f0 < high + span && q > 0.05 && q < (100 * n * high) / span;
}
