import { judgeDrift } from "@/lib/limits/drift";
import { judgeFit } from "@/lib/limits/fit";
import { judgeReturn } from "@/lib/limits/return";
import { judgeTemperature } from "@/lib/limits/temperature";
import type { LimitFacts, Verdict } from "@/lib/limits/verdict";
import type { Limit } from "@/lib/protocol/schema";

/**
 * What the limits of a protocol say about a phase that has closed. A limit that does not concern the phase, or has too few
 * values to judge, says nothing. `silence` and `count` are judged where they happen, not here.
 */
export function judgePhase(limits: readonly Limit[], facts: LimitFacts): Verdict[] {
  return limits.flatMap((limit) => judgeOne(limit, facts) ?? []);
}

function judgeOne(limit: Limit, facts: LimitFacts): Verdict | undefined {
  if (limit.medium !== undefined && limit.medium !== facts.phase.medium) return undefined;
  if (limit.minPhases !== undefined && facts.series.f0Hz.length < limit.minPhases) return undefined;
  switch (limit.kind) {
    case "return":
      return judgeReturn(limit, facts);
    case "drift":
      return judgeDrift(limit, facts);
    case "fit":
      return judgeFit(limit, facts);
    case "temperature":
      return judgeTemperature(limit, facts);
    default:
      return undefined;
  }
}
