import type { UntilCleanBlock } from "./schema";
import type { Facts, PhaseFacts } from "./types";

/**
 * Whether the air check of an `untilClean` lies within tolerance of the reference: |f0/f0ref − 1| ≤ tolerancePpm and,
 * where given, |Q/Qref − 1| ≤ toleranceQPercent. The reference is the baseline, or its mean so far; with none yet one
 * turn passes. A check in which nothing counts shows nothing, so it does not pass.
 */
export function isClean(block: UntilCleanBlock, phase: PhaseFacts | undefined, baseline: Facts["baseline"]): boolean {
  if (!baseline || baseline.n === 0) return true;
  if (phase?.f0Hz === undefined) return false;
  if (Math.abs(ppm(phase.f0Hz, baseline.f0Hz)) > block.tolerancePpm) return false;
  if (block.toleranceQPercent === undefined) return true;
  return phase.q !== undefined && Math.abs(phase.q / baseline.q - 1) * 100 <= block.toleranceQPercent;
}

/** What a person reads when an `untilClean` gives up. */
export function notCleanText(block: UntilCleanBlock, phase: PhaseFacts | undefined, baseline: Facts["baseline"]): string {
  const times = block.maxTimes === 1 ? "Cleaning once" : `Cleaning ${block.maxTimes} times`;
  const aim = `within ${block.tolerancePpm} ppm${
    block.toleranceQPercent === undefined ? "" : ` in f0 and ${block.toleranceQPercent} % in Q`
  }`;
  const found = baseline && phase?.f0Hz !== undefined ? `: f0 is ${ppm(phase.f0Hz, baseline.f0Hz).toFixed(1)} ppm off` : "";
  return `${times} did not bring the air reference back ${aim}${found}.`;
}

function ppm(value: number, reference: number): number {
  return (value / reference - 1) * 1e6;
}
