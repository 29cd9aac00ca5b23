export type PhaseValueOptions = {
  /** Standard error of the one fit, used when there is only one value; in the unit of the values. */
  fitStd?: number;
  /** Median lag-1 autocorrelation of this medium's earlier phases: a floor for r1 while n < 50. */
  medianR1?: number;
};

export type PhaseValue = {
  n: number;
  mean: number;
  /** Standard deviation of the values; NaN for fewer than two. */
  sd: number;
  /** Standard uncertainty of the mean. */
  u: number;
  /** Lag-1 autocorrelation used, within [0, 0.98]. */
  r1: number;
};

const LARGEST_R1 = 0.98;
const FEWEST_BLOCKS = 8;
const ENOUGH_FOR_OWN_R1 = 50;

/**
 * Mean of a phase and its standard uncertainty, for values that may follow each other slowly.
 *
 *   u = max( sd/√n · √((1 + r1)/(1 − r1)),  sd(means of blocks of 2, 4, 8 …)/√(number of blocks) )
 *
 * over the block lengths that give at least 8 whole blocks (a rest at the end is left out). r1 is the
 * lag-1 autocorrelation clipped to [0, 0.98]; for n < 50 it is at least `medianR1`. With n = 2, r1 = 0;
 * with n = 1, u is `fitStd`. Wander slower than the phase is not in u: only phases among themselves show it.
 *
 * @param values What counts, oldest first, any unit, all finite; unchanged.
 * @returns n, mean, sd, u in the unit of the values, r1. No values: NaN except n = 0 and r1 = 0. One value
 *   without `fitStd`: u is NaN.
 * @throws RangeError if a value is not finite, fitStd is negative, or medianR1 lies outside [−1, 1].
 *
 * Source: first-order autoregressive series, variance of the mean (e.g. Priestley, Spectral Analysis and Time
 * Series, §5.3.2); block means as in Flyvbjerg & Petersen, J. Chem. Phys. 91 (1989) 461.
 */
export function phaseValue(values: Float64Array, { fitStd, medianR1 }: PhaseValueOptions = {}): PhaseValue {
  if (fitStd !== undefined && !(fitStd >= 0)) throw new RangeError(`fitStd must be ≥ 0, got ${fitStd}`);
  if (medianR1 !== undefined && !(Math.abs(medianR1) <= 1)) {
    throw new RangeError(`medianR1 must lie within [−1, 1], got ${medianR1}`);
  }
  const n = values.length;
  if (n === 0) return { n, mean: NaN, sd: NaN, u: NaN, r1: 0 };

  const mean = meanOf(values, 0, n);
  if (!Number.isFinite(mean)) throw new RangeError("the values of a phase must be finite");
  if (n === 1) return { n, mean, sd: NaN, u: fitStd ?? NaN, r1: 0 };

  const { sd, r1: ownR1 } = spreadAndLag(values, mean);
  let r1 = n === 2 ? 0 : ownR1;
  if (n > 2 && n < ENOUGH_FOR_OWN_R1) r1 = Math.max(r1, medianR1 ?? 0);
  r1 = Math.min(Math.max(r1, 0), LARGEST_R1);

  let u = (sd / Math.sqrt(n)) * Math.sqrt((1 + r1) / (1 - r1));
  for (let length = 2; Math.floor(n / length) >= FEWEST_BLOCKS; length *= 2) {
    u = Math.max(u, blockUncertainty(values, length));
  }
  return { n, mean, sd, u, r1 };
}

/** Mean of values[from, from + count), taken about the first value so that a large common part costs no digits. */
function meanOf(values: Float64Array, from: number, count: number): number {
  const origin = values[from];
  let sum = 0;
  for (let i = from; i < from + count; i++) sum += values[i] - origin;
  return origin + sum / count;
}

function spreadAndLag(values: Float64Array, mean: number): { sd: number; r1: number } {
  let squares = 0;
  let products = 0;
  let previous = 0;
  for (const value of values) {
    const d = value - mean;
    squares += d * d;
    products += d * previous;
    previous = d;
  }
  return { sd: Math.sqrt(squares / (values.length - 1)), r1: squares > 0 ? products / squares : 0 };
}

function blockUncertainty(values: Float64Array, length: number): number {
  const blocks = Math.floor(values.length / length);
  let mean = 0;
  let squares = 0;
  for (let k = 0; k < blocks; k++) {
    const d = meanOf(values, k * length, length) - mean;
    mean += d / (k + 1);
    squares += d * d * (k / (k + 1));
  }
  return Math.sqrt(squares / (blocks - 1) / blocks);
}
