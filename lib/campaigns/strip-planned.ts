import { pastSegment, segmentKind, type PastStep } from "@/lib/campaigns/strip-past";
import type { StripSegment } from "@/lib/campaigns/strip-schema";
import { forecast, type Segment } from "@/lib/protocol/forecast";
import type { Definition } from "@/lib/protocol/schema";
import { trackKey, type Cursor, type RigAbilities } from "@/lib/protocol/types";

export const MOST_PLANNED = 400;

export type Track = { medium: string; setPointC: number | null; f0Hz: number; q: number };

type Plan = {
  definition: Definition;
  cursor: Cursor;
  abilities: RigAbilities;
  timeZone: string;
  nominal: { f0Hz: number; q: number };
  tracks: readonly Track[];
  clock: Date;
  /** The step last made, when it took time. */
  last: PastStep | undefined;
};

/** What is left of the step under way at the pace it has shown, and the steps that follow, 400 at most. */
export function plannedSegments({ definition, cursor, abilities, timeZone, nominal, tracks, clock, last }: Plan): StripSegment[] {
  const known = Object.fromEntries(tracks.map(({ medium, setPointC, f0Hz, q }) => [trackKey(medium, setPointC), { f0Hz, q }]));
  const open = last?.to === null ? last : undefined;
  const restMs = open?.repeats && open.stored > 0 ? Math.max(0, ((clock.getTime() - open.from.getTime()) * (open.repeats - open.stored)) / open.stored) : 0;
  const startMs = clock.getTime() + restMs;
  const ahead = forecast(definition, cursor, { nowMs: startMs, timeZone, abilities, nominal, tracks: known }, MOST_PLANNED);
  const rest: StripSegment[] = restMs > 0 && open ? [{ ...pastSegment(open, clock), from: clock.toISOString(), to: new Date(startMs).toISOString(), planned: true }] : [];
  return [...rest, ...drawnAhead(ahead, startMs)];
}

/** Steps to come as a strip draws them; `startMs` is where their seconds count from. */
export function drawnAhead(ahead: readonly Segment[], startMs: number): StripSegment[] {
  const time = (seconds: number) => new Date(startMs + seconds * 1000).toISOString();
  return ahead.filter(({ kind }) => kind !== "ask" && kind !== "settle").map((segment) => planned(segment, time));
}

function planned({ kind, role, medium, slot, cycle, label, startS, durationS }: Segment, time: (seconds: number) => string): StripSegment {
  const of = medium ?? slot;
  return {
    kind: segmentKind(kind, medium ?? null),
    from: time(startS),
    to: time(startS + durationS),
    planned: true,
    cycle,
    label,
    ...(role === "find" ? { find: true } : {}),
    ...(of && of !== "air" ? { medium: of } : {}),
  };
}
