import { say, stateOf, type LimitFacts, type Verdict } from "@/lib/limits/verdict";
import { blockMeans } from "@/lib/numerics/drift/block-means";
import { drift } from "@/lib/numerics/drift/drift";
import type { Limit } from "@/lib/protocol/schema";

type DriftLimit = Extract<Limit, { kind: "drift" }>;

const FEWEST_PHASES = 5;

/** Beyond these, neighbours are judged by their mean: the next step waits for the judgement, which takes the square of them. */
const MOST_VALUES = 100;

/**
 * Slope of the phase values since the baseline, in ppm a day of their mean. Only what is beyond doubt counts: the slope less
 * twice its standard uncertainty. Without a medium the limit watches the air references.
 */
export function judgeDrift(limit: DriftLimit, { phase, series }: LimitFacts): Verdict | undefined {
  if (limit.medium === undefined ? phase.medium !== "air" || phase.role !== "reference" : phase.role === "check") return undefined;
  const values = limit.quantity === "f0" ? series.f0Hz : series.q;
  if (values.length < FEWEST_PHASES) return undefined;

  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  const { x: atDays, y: ppm } = blockMeans({ x: series.atDays, y: values.map((value) => (value / mean - 1) * 1e6) }, MOST_VALUES);
  const line = drift({ atDays, values: ppm });
  if (!line) return undefined;
  const certain = Math.max(0, Math.abs(line.slopePerDay) - 2 * line.u);
  const name = limit.quantity === "f0" ? "f0" : "Q";
  const slope = `${name} in ${phase.medium} drifts by ${say(line.slopePerDay)} ± ${say(2 * line.u)} ppm a day (k = 2)`;
  const common = { limitId: limit.id, kind: limit.kind };

  if (limit.ppmPerDay !== undefined) {
    return {
      ...common,
      state: stateOf(certain, limit.ppmPerDay, limit.clearAt),
      value: line.slopePerDay,
      limit: limit.ppmPerDay,
      unit: "ppm/d",
      text: `${slope}, limit ${say(limit.ppmPerDay)} ppm a day`,
    };
  }
  const days = limit.withinDays as number;
  const crosses = limit.crossesPpm as number;
  const last = series.atDays.length - 1;
  const soFar = line.intercept + line.slopePerDay * series.atDays[last] - (line.intercept + line.slopePerDay * series.atDays[0]);
  const then = Math.abs(soFar + Math.sign(line.slopePerDay) * certain * days);
  return {
    ...common,
    state: certain === 0 ? "inside" : stateOf(then, crosses, limit.clearAt),
    value: then,
    limit: crosses,
    unit: "ppm",
    text: `${slope} and would have moved ${say(then)} ppm within ${say(days)} days, limit ${say(crosses)} ppm`,
  };
}
