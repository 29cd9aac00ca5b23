import { drawnAhead, MOST_PLANNED } from "@/lib/campaigns/strip-planned";
import { estimate, type Estimate } from "@/lib/protocol/estimate";
import { forecast, type Segment } from "@/lib/protocol/forecast";
import { start } from "@/lib/protocol/interpreter";
import type { World } from "@/lib/protocol/made-up-world";
import type { Definition } from "@/lib/protocol/schema";
import type { RigAbilities } from "@/lib/protocol/types";
import { visitBlocks } from "@/lib/protocol/visit-blocks";
import type { EstimateAnswer } from "@/lib/protocols/schema";

/** Before a rig is chosen nothing is known to be impossible. */
export const ANY_RIG: RigAbilities = { minHz: 1, maxHz: 1e9, maxPoints: 4001, maxDriveV: 1000 };

/** A common wire in air, for an estimate before a sensor is chosen. */
export const ANY_SENSOR = { f0Hz: 2000, q: 2000 };

const MOST_SEGMENTS = 3000;

/** The likely course: what one turn of each step takes, and its first steps as a strip draws them. */
export function planAhead(definition: Definition, world: World): Pick<EstimateAnswer, "blocks" | "strip"> {
  const ahead = forecast(definition, start(definition), world, MOST_SEGMENTS);
  const first = ahead.slice(0, MOST_PLANNED);
  const seconds = first.reduce((latest, { startS, durationS }) => Math.max(latest, startS + durationS), 0);
  return {
    blocks: takenByBlocks(definition, ahead),
    strip: {
      from: new Date(world.nowMs).toISOString(),
      to: new Date(world.nowMs + seconds * 1000).toISOString(),
      isWhole: first.length === ahead.length,
      segments: drawnAhead(first, world.nowMs),
    },
  };
}

/** By block id the mean over its turns within the first few thousand steps. */
function takenByBlocks(definition: Definition, ahead: readonly Segment[]): EstimateAnswer["blocks"] {
  const sums = new Map<string, { seconds: number; turns: number }>();
  for (const { blockId, role, durationS } of ahead) {
    if (role === "find") continue;
    const { seconds = 0, turns = 0 } = sums.get(blockId) ?? {};
    sums.set(blockId, { seconds: seconds + durationS, turns: turns + 1 });
  }
  const millilitres = new Map<string, number>();
  visitBlocks(definition, (block) => {
    if (block.kind === "fill") millilitres.set(block.id, block.volumeMl);
    if (block.kind === "rinse") millilitres.set(block.id, block.volumeMl * block.times);
  });
  return Object.fromEntries([...sums].map(([id, { seconds, turns }]) => [id, { seconds: seconds / turns, ml: millilitres.get(id) ?? 0 }]));
}

const MOST_KEPT = 2000;
const kept = new Map<string, Pick<Estimate, "seconds" | "wasteMl">>();

/** Duration and waste of a frozen version on a rig and sensor like most. Kept by version and day, as versions never change. */
export function usualEstimate(versionId: string, definition: Definition, { now, timeZone }: { now: Date; timeZone: string }): Pick<Estimate, "seconds" | "wasteMl"> {
  const day = Math.floor(now.getTime() / 86_400_000);
  const key = `${versionId} ${day} ${timeZone}`;
  const known = kept.get(key);
  if (known) return known;
  const { seconds, wasteMl } = estimate(definition, { nowMs: day * 86_400_000, timeZone, abilities: ANY_RIG, nominal: ANY_SENSOR });
  if (kept.size >= MOST_KEPT) kept.clear();
  kept.set(key, { seconds, wasteMl });
  return { seconds, wasteMl };
}
