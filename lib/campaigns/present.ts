import type { CampaignAnswer, CampaignItem } from "@/lib/campaigns/answers";
import type { HoldReason } from "@/lib/campaigns/open-hold";
import type { CampaignState } from "@/lib/campaigns/schema";
import { stateWord } from "@/lib/campaigns/state-word";
import type { Cursor } from "@/lib/protocol/types";
import type { PlannedCampaign } from "@/models/json";

/** A campaign as the read queries find it. */
export type CampaignRecord = {
  id: string;
  name: string;
  number: number | null;
  state: CampaignState;
  setAside: boolean;
  origin: "protocol" | "import";
  priority: number;
  parking: CampaignAnswer["parking"];
  rigId: string | null;
  rig: string | null;
  timeZone: string;
  clock: "real" | "simulated" | null;
  lastContactAt: Date | null;
  sensorId: string | null;
  sensor: string | null;
  protocolId: string | null;
  protocolVersionId: string | null;
  protocol: string | null;
  version: number | null;
  startAt: Date | null;
  createdAt: Date;
  startedAt: Date | null;
  endedAt: Date | null;
  startedClock: Date | null;
  endedClock: Date | null;
  endText: string | null;
  cursor: Cursor | null;
  cursorText: string | null;
  planned: PlannedCampaign | null;
  importedCycles: number | null;
  createdBy: string | null;
  holdReasons: HoldReason[];
  repeats: number;
  rigNow: Date | null;
  stepKind: string | null;
  shiftPpm: number | null;
  shiftHz: number | null;
  shiftU: number | null;
  limitHz: number | null;
  f0Hz: number | null;
  f0U: number | null;
  q: number | null;
  qU: number | null;
  medium: string | null;
};

const DOING: Record<string, string> = { fill: "Filling", rinse: "Cleaning", drain: "Draining", dry: "Drying", settle: "Settling", wait: "Waiting for a date" };

const inMHz = (hz: number | null): number | null => (hz === null ? null : 1000 * hz);

export const iso = (at: Date | null): string | null => at?.toISOString() ?? null;

export function presentCampaign(found: CampaignRecord): CampaignItem {
  const { planned, cursor, f0Hz, q, medium } = found;
  const word = found.state === "running" && found.stepKind ? (DOING[found.stepKind] ?? "Measuring") : stateWord(found.state, found.holdReasons);
  return {
    id: found.id,
    name: found.name,
    number: found.number,
    state: found.state,
    word,
    setAside: found.setAside,
    origin: found.origin,
    priority: found.priority,
    rigId: found.rigId,
    rig: found.rig,
    timeZone: found.timeZone,
    sensorId: found.sensorId,
    sensor: found.sensor,
    protocolId: found.protocolId,
    protocolVersionId: found.protocolVersionId,
    protocol: found.protocol,
    version: found.version,
    startAt: iso(found.startAt),
    startedAt: iso(found.startedAt),
    endedAt: iso(found.endedAt),
    startedClock: iso(found.startedClock),
    endedClock: iso(found.endedClock),
    cursor: found.cursorText,
    cycle: found.importedCycles ?? cursor?.cyclesBegun ?? 0,
    progress: { repeats: found.repeats, repeatsPlanned: planned?.repeats ?? null, cycles: planned?.cycles ?? null },
    expectedEnd: expectedEnd(found),
    shiftPpm: found.shiftPpm,
    air: found.shiftHz === null ? null : { shiftMHz: 1000 * found.shiftHz, u: inMHz(found.shiftU), limitMHz: inMHz(found.limitHz) },
    last: f0Hz === null || q === null || medium === null ? null : { f0Hz, f0U: found.f0U, q, qU: found.qU, medium },
  };
}

/**
 * When a campaign under way will end by its rig's clock: what the estimate said, carried on in proportion to the repeats
 * still to come once enough of them have been seen to tell the pace. Unknown while it is held.
 */
function expectedEnd({ state, planned, startedClock, rigNow, repeats }: CampaignRecord): CampaignItem["expectedEnd"] {
  if (state !== "running" || !planned || !startedClock) return null;
  const nowMs = (rigNow ?? startedClock).getTime();
  const left = planned.repeats > 0 ? Math.max(0, 1 - repeats / planned.repeats) : 0;
  const elapsedS = (nowMs - startedClock.getTime()) / 1000;
  const paceS = left < 0.95 && elapsedS > 0 ? elapsedS / (1 - left) : planned.seconds;
  const at = nowMs + left * paceS * 1000;
  const slackMs = (left * Math.max(planned.highS - planned.lowS, 0.02 * planned.seconds) * 1000) / 2;
  const time = (ms: number) => new Date(ms).toISOString();
  return { at: time(at), earliest: time(at - slackMs), latest: time(at + slackMs) };
}
