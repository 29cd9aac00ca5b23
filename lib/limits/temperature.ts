import { say, type LimitFacts, type Verdict } from "@/lib/limits/verdict";
import type { Limit } from "@/lib/protocol/schema";

/** Any reading outside is a breach; one whole phase inside is a return. `clearAt` has no meaning for a range and is not used. */
export function judgeTemperature(limit: Extract<Limit, { kind: "temperature" }>, { phase: { minC, maxC, medium } }: LimitFacts): Verdict | undefined {
  if (minC === undefined || maxC === undefined) return undefined;
  const low = minC < limit.minC;
  const high = maxC > limit.maxC;
  const farLow = low && (!high || limit.minC - minC > maxC - limit.maxC);
  const value = farLow ? minC : maxC;
  return {
    limitId: limit.id,
    kind: limit.kind,
    state: low || high ? "breach" : "inside",
    value,
    limit: farLow ? limit.minC : limit.maxC,
    unit: "°C",
    text: `the cell reached ${say(value)} °C in ${medium}, limit ${say(limit.minC)} to ${say(limit.maxC)} °C`,
  };
}
