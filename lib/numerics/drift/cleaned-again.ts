import type { AirReferences } from "@/lib/numerics/drift/air-references";
import { median } from "@/lib/numerics/statistics/median";
import { studentTQuantile } from "@/lib/numerics/statistics/distributions";

export type CleanedAgain = {
  /** How many references followed a clean-again. */
  times: number;
  /** Whether it takes off what had grown: `untried` without one, `unclear` when the noise hides it. */
  takesOff: "yes" | "no" | "unclear" | "untried";
  /** Share of the deviation that it takes off; NaN when untried. */
  share: number;
  shareU: number;
};

/** Surely less than this share counts as taking nothing off; our choice. */
const littleShare = 0.3;

/** References at the beginning of a mount that say where it stood before anything grew. */
const firstOfMount = 3;

/**
 * Whether cleaning once more brings the air reference back: the change across each clean-again against the deviation just
 * before it, from the first references of the mount.
 *
 *   share = −Σ d A / Σ A², u = s_d / √(Σ A²), d = after − before, A = before − first of the mount
 *
 * s_d is the scatter of differences of adjacent references elsewhere (median of their sizes, scaled for normal values).
 *
 * @param sure Probability of the decision, two-sided.
 */
export function cleanedAgain({ f0Ppm, before }: AirReferences, sure: number): CleanedAgain {
  const elsewhere: number[] = [];
  let start = 0;
  let times = 0;
  let products = 0;
  let squares = 0;
  for (let i = 1; i < f0Ppm.length; i++) {
    const difference = f0Ppm[i] - f0Ppm[i - 1];
    if (before[i] === "remount") start = i;
    else if (before[i] === "cleanAgain") {
      times++;
      const grown = f0Ppm[i - 1] - meanOf(f0Ppm.subarray(start, Math.min(start + firstOfMount, i)));
      products -= difference * grown;
      squares += grown ** 2;
    } else if (before[i - 1] !== "cleanAgain") elsewhere.push(difference);
  }
  if (times === 0) return { times, takesOff: "untried", share: NaN, shareU: NaN };
  const share = products / squares;
  if (elsewhere.length < 3 || !Number.isFinite(share)) return { times, takesOff: "unclear", share, shareU: NaN };

  const middle = median(Float64Array.from(elsewhere));
  const scatter = median(Float64Array.from(elsewhere, (difference) => Math.abs(difference - middle))) / 0.6744897501960817;
  const shareU = scatter / Math.sqrt(squares);
  const margin = studentTQuantile((1 + sure) / 2, elsewhere.length - 1) * shareU;
  const takesOff = share - margin > 0 ? "yes" : share + margin < littleShare ? "no" : "unclear";
  return { times, takesOff, share, shareU };
}

function meanOf(values: Float64Array): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
