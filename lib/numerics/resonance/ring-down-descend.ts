import { DECAY_PARAMETERS, decayModel, emptyDecayModel, type Decay, type DecayModel } from "@/lib/numerics/resonance/ring-down-model";
import { solveCholesky } from "@/lib/numerics/resonance/small-linear";

const MOST_STEPS = 60;
/** Done after a step that promises less than this share of a variance. */
const SMALL_GAIN = 1e-6;
const matrix = new Float64Array(DECAY_PARAMETERS ** 2);
const step = new Float64Array(DECAY_PARAMETERS);

export type DecaySolution = Decay & { model: DecayModel; settled: boolean; evaluations: number };

/**
 * Damped Gauss–Newton over ω and γ, and the bend.
 *
 * @param free 2 for a straight decay, 3 to let it bend.
 */
export function descendDecay(y: Float64Array, start: Decay, free: 2 | 3): DecaySolution {
  const n = y.length;
  let here = emptyDecayModel();
  let there = emptyDecayModel();
  let at = start;
  let damping = 0;
  let settled = false;
  let evaluations = 1;
  if (!decayModel(y, at, here)) return { ...at, model: here, settled, evaluations };
  while (!settled && evaluations < MOST_STEPS && damping < 1e8) {
    for (let j = 0; j < free; j++) {
      for (let l = 0; l < free; l++) matrix[free * j + l] = here.gram[DECAY_PARAMETERS * j + l] * (j === l ? 1 + damping : 1);
      step[j] = here.gradient[j];
    }
    if (!solveCholesky(matrix, step, free)) break;
    let gain = 0;
    for (let j = 0; j < free; j++) gain += step[j] * here.gradient[j];
    if (!Number.isFinite(gain)) break;
    const dOmega = step[0] / n;
    const dGamma = step[1] / n;
    const dBend = free > 2 ? step[2] : 0;
    settled = damping <= 1 && (gain <= (SMALL_GAIN * here.squares) / n || Math.abs(dOmega) + Math.abs(dGamma) + Math.abs(dBend) < 1e-14);
    const longest = at.gamma + 2 / n;
    const cut = Math.max(1, Math.abs(dOmega) / longest, Math.abs(dGamma) / (0.7 * longest), Math.abs(dBend));
    const next = { omega: at.omega + dOmega / cut, gamma: Math.max(at.gamma + dGamma / cut, at.gamma / 5), bend: at.bend + dBend / cut };
    const solved = decayModel(y, next, there);
    evaluations++;
    if (solved && (there.squares <= here.squares || settled)) {
      at = next;
      [here, there] = [there, here];
      damping = damping < 1e-3 ? 0 : damping / 10;
    } else {
      damping = Math.max(1e-2, damping * 10);
    }
  }
  const { omega, gamma } = at;
  return { ...at, model: here, settled: settled && omega > 0 && omega < Math.PI && gamma > 0, evaluations };
}
