import { deadTimeBias } from "@/lib/numerics/stability/dead-time-bias";
import type { Statistic } from "@/lib/numerics/stability/deviation";
import { noiseNames, type Alpha } from "@/lib/numerics/stability/power-law";
import type { StabilityPoint } from "@/lib/numerics/stability/stability-curve";

/** Pauses below this share of a repeat are not worth a correction; our choice. */
const negligible = 0.02;

export type DeadTimeTreatment = {
  /** Spacing of repeats over the length of one; 1 without dead time. */
  r: number;
  /** Share of the time in which nothing is measured. */
  deadShare: number;
  /** Largest share by which dead time changes a deviation of the curve, up or down; where negligible, the averaging time. */
  largestEffect: number;
  /**
   * `none`: no dead time. `negligible`: below 2 % of a repeat, and the points stand. `corrected`: points are
   * freed of it. `not available`: there are no bias functions for this statistic, and the points stand.
   */
  treatment: "none" | "negligible" | "corrected" | "not available";
  points: StabilityPoint[];
};

const noiseExponent = new Map(Object.entries(noiseNames).map(([alpha, name]) => [name, Number(alpha) as Alpha]));

/**
 * What the pauses between repeats do to an Allan deviation curve, and the curve freed of it.
 *
 * A point of m repeats spaced T = τ₀ apart, each τ long, is an Allan deviation over mτ of measuring seen through dead time;
 * its variance is B₂ B₃ times that without. Corrected points stand at mτ, with deviation and band divided by √(B₂ B₃) for
 * the noise type identified at each. White frequency noise needs no correction but the averaging time.
 *
 * @param points Of `stabilityCurve`.
 * @param tau0S Spacing of repeats in seconds.
 * @param repeatS Time in which a repeat measures, in seconds, above 0; at most the spacing but for the clock's scatter.
 * @throws RangeError if a time is not above 0.
 *
 * Source: J. A. Barnes and D. W. Allan, NIST Technical Note 1318 (1990); see `deadTimeBias`. Degrees of freedom are left as
 * they are.
 */
export function withoutDeadTime({
  points,
  statistic,
  tau0S,
  repeatS,
}: {
  points: readonly StabilityPoint[];
  statistic: Statistic;
  tau0S: number;
  repeatS: number;
}): DeadTimeTreatment {
  if (!(tau0S > 0 && repeatS > 0)) throw new RangeError("spacing and length of repeats must be above 0");
  const r = Math.max(1, tau0S / repeatS);
  const stated = { r, deadShare: 1 - 1 / r };
  if (r === 1) return { ...stated, largestEffect: 0, treatment: "none", points: [...points] };
  if (statistic !== "adev" && statistic !== "oadev") return { ...stated, largestEffect: NaN, treatment: "not available", points: [...points] };

  if (r - 1 < negligible) return { ...stated, largestEffect: r - 1, treatment: "negligible", points: [...points] };

  const roots = points.map(({ noise, m }) => Math.sqrt(deadTimeBias({ alpha: noiseExponent.get(noise) ?? 0, r, m }).variance));
  const largestEffect = roots.reduce((most, root) => Math.max(most, Math.abs(root - 1)), 0);
  const corrected = points.map((point, i) => ({
    ...point,
    tauS: point.m * repeatS,
    deviation: point.deviation / roots[i],
    lower: point.lower / roots[i],
    upper: point.upper / roots[i],
  }));
  return { ...stated, largestEffect, treatment: "corrected", points: corrected };
}
