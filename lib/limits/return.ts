import { say, stateOf, worst, type LimitFacts, type Verdict } from "@/lib/limits/verdict";
import { ewma } from "@/lib/numerics/statistics/ewma";
import { movingRangeSigma } from "@/lib/numerics/statistics/moving-range-sigma";
import type { Limit } from "@/lib/protocol/schema";

type ReturnLimit = Extract<Limit, { kind: "return" }>;

/** Below this many references the moving range says too little about σ, and the trend chart is not read (common practice, no source). */
const FEWEST_FOR_TREND = 10;

/**
 * Did the sensor come back? Judges an air reference against the complete baseline: breach when the deviation exceeds its
 * tolerance, or when the EWMA of the references does (λ 0.2, L 2.962, σ from the moving range).
 */
export function judgeReturn(limit: ReturnLimit, { phase, baseline, series }: LimitFacts): Verdict | undefined {
  if (phase.medium !== "air" || phase.role !== "reference" || !baseline?.complete) return undefined;
  const verdicts: Verdict[] = [];
  if (limit.tolerancePpm !== undefined && phase.f0Hz !== undefined) {
    const ppm = (value: number) => (value / baseline.f0Hz - 1) * 1e6;
    verdicts.push(judgeOne(limit, "f0", "ppm", phase.f0Hz, series.f0Hz, ppm, limit.tolerancePpm));
  }
  if (limit.toleranceQPercent !== undefined && phase.q !== undefined) {
    const percent = (value: number) => (value / baseline.q - 1) * 100;
    verdicts.push(judgeOne(limit, "Q", "%", phase.q, series.q, percent, limit.toleranceQPercent));
  }
  return worst(verdicts);
}

function judgeOne(
  limit: ReturnLimit,
  name: string,
  unit: string,
  value: number,
  series: Float64Array,
  deviation: (value: number) => number,
  tolerance: number,
): Verdict {
  const off = deviation(value);
  const state = stateOf(Math.abs(off), tolerance, limit.clearAt);
  const verdict = {
    limitId: limit.id,
    kind: limit.kind,
    state,
    value: off,
    limit: tolerance,
    unit,
    text: `air reference: ${name} is ${say(off)} ${unit} from the baseline, limit ± ${say(tolerance)} ${unit}`,
  };
  if (state === "breach" || !trends(series.map(deviation))) return verdict;
  return {
    ...verdict,
    state: "breach",
    text: `air reference: ${name} moves away from the baseline steadily (EWMA signal), now ${say(off)} ${unit}, limit ± ${say(tolerance)} ${unit}`,
  };
}

function trends(deviations: Float64Array): boolean {
  if (deviations.length < FEWEST_FOR_TREND) return false;
  const sigma = movingRangeSigma(deviations);
  return sigma > 0 && ewma({ values: deviations, mean: 0, sigma }).signals;
}
