import type { CoolingPhase } from "@/lib/numerics/drift/cooling";
import { median } from "@/lib/numerics/statistics/median";

export type Discard = {
  /** Leading repeats to leave out of a typical phase; undefined where even half of it would not be enough. */
  repeats: number | undefined;
  /** How long after drying the first repeat that counts may begin; 0 where nothing is left out. */
  waitS: number;
  /** What the return then leaves in the phase value, or without leaving out more than half; in the unit of the values. */
  biasLeft: number;
  /** What it may leave. */
  tolerance: number;
};

/** Share of the standard error that a return may leave. */
const harmless = 1 / 3;

/**
 * How many leading repeats to leave out so that an exponential return moves the mean of the others by no more than a
 * tolerance. The typical phase has the median beginning, spacing and length of those given.
 *
 * @param transient Amplitude at 0 s and τ in seconds; without it nothing is left out.
 * @param tolerance In the unit of the values; by default a third of the standard error of a phase mean in white noise,
 *   the scatter taken from differences of adjacent values.
 */
export function discardFor(
  phases: readonly CoolingPhase[],
  { transient, tolerance }: { transient?: { amplitude: number; tauS: number }; tolerance?: number },
): Discard {
  const typical = (of: (phase: CoolingPhase) => number) => median(Float64Array.from(phases, of));
  const length = Math.floor(typical(({ values }) => values.length));
  const startS = typical(({ sinceDryS }) => sinceDryS[0]);
  const spacingS = typical(({ sinceDryS }) => (sinceDryS[sinceDryS.length - 1] - sinceDryS[0]) / (sinceDryS.length - 1));
  const allowed = tolerance ?? (harmless * adjacentScatter(phases)) / Math.sqrt(length);
  if (!transient) return { repeats: 0, waitS: 0, biasLeft: 0, tolerance: allowed };

  const left = Float64Array.from({ length }, (_, i) => Math.abs(transient.amplitude) * Math.exp(-(startS + i * spacingS) / transient.tauS));
  const biasAfter = (discarded: number) => left.subarray(discarded).reduce((sum, value) => sum + value, 0) / (length - discarded);
  const most = Math.floor(length / 2);
  for (let repeats = 0; repeats <= most; repeats++) {
    const biasLeft = biasAfter(repeats);
    if (biasLeft <= allowed) return { repeats, waitS: repeats === 0 ? 0 : startS + repeats * spacingS, biasLeft, tolerance: allowed };
  }
  const waitS = transient.tauS * Math.log((biasAfter(0) * Math.exp(startS / transient.tauS)) / allowed);
  return { repeats: undefined, waitS, biasLeft: biasAfter(most), tolerance: allowed };
}

/** Standard deviation of white noise with these differences of adjacent values, whose median does not see a return. */
function adjacentScatter(phases: readonly CoolingPhase[]): number {
  const sizes = phases.flatMap(({ values }) => [...values.subarray(1).map((value, i) => Math.abs(value - values[i]))]);
  return median(Float64Array.from(sizes)) / 0.6744897501960817 / Math.SQRT2;
}
