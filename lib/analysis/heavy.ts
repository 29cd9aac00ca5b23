import { drift } from "@/lib/numerics/drift/drift";
import type { Taus } from "@/lib/numerics/stability/averaging-factors";
import type { Statistic } from "@/lib/numerics/stability/deviation";
import { stabilityCurve, type StabilityPoint } from "@/lib/numerics/stability/stability-curve";
import { stretches } from "@/lib/numerics/stability/stretches";

export type StabilityInput = {
  atS: Float64Array;
  values: Float64Array;
  leftOut: Uint8Array;
  normalise: "fractional" | "absolute";
  statistic: Statistic;
  taus: Taus;
  confidence: number;
};

type Stability = { tau0S: number; reference: number; points: StabilityPoint[]; stretches: number };

/** A stability curve of a series about its mean; undefined below three values that count. */
function stability({ atS, values, leftOut, normalise, ...how }: StabilityInput): Stability | undefined {
  let n = 0;
  let reference = 0;
  for (let i = 0; i < values.length; i++) if (!leftOut[i]) reference += (values[i] - reference) / ++n;
  if (n < 3) return undefined;
  const y = values.map((value) => (normalise === "fractional" ? value / reference - 1 : value - reference));
  const split = stretches({ atS, y, leftOut });
  const { points } = stabilityCurve({ stretches: split.stretches, tau0S: split.tau0S, ...how });
  return { tau0S: split.tau0S, reference, points, stretches: split.stretches.length };
}

/** Computations that may take longer than an event loop can be kept waiting, by name: plain data in, plain data out. */
export const heavy = { stability, drift };

export type Heavy = typeof heavy;
