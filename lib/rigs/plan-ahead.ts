import { MOST_PLANNED, plannedSegments } from "@/lib/campaigns/strip-planned";
import type { StripSegment } from "@/lib/campaigns/strip-schema";
import { resumed } from "@/lib/protocol/forecast";
import { start } from "@/lib/protocol/interpreter";
import { runThrough } from "@/lib/protocol/run-through";
import type { LaneRig, OpenCampaign } from "@/lib/rigs/lane-rows";

type Planned = Pick<OpenCampaign, "definition" | "cursor" | "nominalF0Hz" | "nominalQ">;
type On = Pick<LaneRig, "timeZone" | "abilities">;

/** What a campaign still takes from where it stands: seconds, steps, mL by slot. Nothing before its rig has told what it can do. */
export function stillToCome({ definition, cursor, nominalF0Hz, nominalQ }: Planned, { timeZone, abilities }: On, nowMs: number) {
  if (!abilities) return { seconds: 0, steps: 0, isCut: false, mlPerSlot: new Map<string, number>() };
  const from = cursor ? resumed(definition, cursor) : start(definition);
  const { seconds, counts } = runThrough(definition, { nowMs, timeZone, abilities, nominal: { f0Hz: nominalF0Hz, q: nominalQ } }, "likely", from);
  const steps = counts.get("steps") ?? 0;
  const mlPerSlot = new Map([...counts].flatMap(([key, ml]) => (key.startsWith("ml:") ? [[key.slice(3), ml] as const] : [])));
  return { seconds, steps, isCut: steps > MOST_PLANNED, mlPerSlot };
}

/** The steps of a campaign that begins at a time to come. */
export function segmentsFrom({ definition, nominalF0Hz, nominalQ }: Planned, { timeZone, abilities }: On, fromMs: number): StripSegment[] {
  if (!abilities) return [];
  return plannedSegments({ definition, cursor: start(definition), abilities, timeZone, nominal: { f0Hz: nominalF0Hz, q: nominalQ }, tracks: [], clock: new Date(fromMs), last: undefined });
}
