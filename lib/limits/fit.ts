import { say, stateOf, type LimitFacts, type Verdict } from "@/lib/limits/verdict";
import type { Limit } from "@/lib/protocol/schema";

/** Share of a closed phase's repeats that are left out because their fit failed or lies at the edge of the sweep. */
export function judgeFit(limit: Extract<Limit, { kind: "fit" }>, { phase }: LimitFacts): Verdict | undefined {
  if (phase.n === 0) return undefined;
  const share = (phase.unusable / phase.n) * 100;
  return {
    limitId: limit.id,
    kind: limit.kind,
    state: stateOf(share, limit.sharePercent, limit.clearAt),
    value: share,
    limit: limit.sharePercent,
    unit: "%",
    text: `${say(share)} % of the fits in ${phase.medium} cannot be used (${phase.unusable} of ${phase.n}), limit ${say(limit.sharePercent)} %`,
  };
}
