import type { Chosen } from "@/lib/campaigns/bindings";
import type { CampaignProblem } from "@/lib/campaigns/draft-schema";
import { estimate } from "@/lib/protocol/estimate";
import { problems } from "@/lib/protocol/problems";
import type { RigAbilities } from "@/lib/protocol/types";

export type Plan = {
  seconds: number;
  lowS: number;
  highS: number;
  steps: number;
  repeats: number;
  cycles: number;
  neededMl: Readonly<Record<string, number>>;
  wasteMl: number;
  /** How often somebody is asked to do something. */
  people: number;
  problems: CampaignProblem[];
};

/** Before a rig's agent has told what it can do, nothing is known to be impossible. */
const UNKNOWN_RIG: RigAbilities = { minHz: 1, maxHz: 1e9, maxPoints: 4001, maxDriveV: 1000 };

/** What the protocol takes on this rig with this sensor, begun at `from`, and what of it the rig cannot do. */
export function planCampaign({ definition, rig, sensor }: Chosen, from: Date): Plan {
  const estimated = estimate(definition, {
    nowMs: from.getTime(),
    timeZone: rig.timeZone,
    abilities: rig.abilities ?? UNKNOWN_RIG,
    nominal: { f0Hz: sensor.nominalF0Hz, q: sensor.nominalQ },
  });
  const { seconds, steps, repeats, cycles, mlPerSlot, wasteMl, people } = estimated;
  // Too much waste is a caution with somebody's word, not one more remark.
  const forCheck = rig.abilities ? { timeZone: rig.timeZone, abilities: rig.abilities, wasteCapacityMl: null } : undefined;
  return {
    seconds: seconds.likely,
    lowS: seconds.low,
    highS: seconds.high,
    steps,
    repeats,
    cycles,
    neededMl: mlPerSlot,
    wasteMl,
    people: people.asks,
    problems: problems(definition, forCheck, sensor, estimated).map(({ path, ...problem }) => ({ path: `definition.${path}`, ...problem })),
  };
}
