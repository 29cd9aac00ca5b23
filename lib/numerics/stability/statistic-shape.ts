import type { Statistic } from "@/lib/numerics/stability/deviation";

/**
 * How a statistic is built from the phase record (the running sum of the values): `differences` of phase at span m
 * (2 Allan, 3 Hadamard), `averaged` when the phase is first averaged over m, `overlapping` when terms start at every
 * value instead of at every m-th. The total deviation is listed as the overlapping Allan deviation it extends.
 */
export type StatisticShape = { differences: 2 | 3; averaged: boolean; overlapping: boolean };

export const statisticShapes: Readonly<Record<Statistic, StatisticShape>> = {
  adev: { differences: 2, averaged: false, overlapping: false },
  oadev: { differences: 2, averaged: false, overlapping: true },
  mdev: { differences: 2, averaged: true, overlapping: true },
  tdev: { differences: 2, averaged: true, overlapping: true },
  hdev: { differences: 3, averaged: false, overlapping: false },
  ohdev: { differences: 3, averaged: false, overlapping: true },
  totdev: { differences: 2, averaged: false, overlapping: true },
};

/** Number of terms that a stretch of `length` values gives at averaging factor m; 0 when it is too short. */
export function termsIn(statistic: Statistic, length: number, m: number): number {
  if (statistic === "totdev") return length >= 2 * m ? length - 1 : 0;
  const { differences, averaged, overlapping } = statisticShapes[statistic];
  if (overlapping) return Math.max(0, length - (differences + (averaged ? 1 : 0)) * m + (averaged ? 2 : 1));
  return Math.max(0, Math.floor(length / m) - differences + 1);
}
