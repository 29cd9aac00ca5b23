import type { StripSegment } from "@/lib/campaigns/strip-schema";

/** Longest first stretch of a plan that is worked out step by step; what lies behind it is drawn as a dashed line. */
type Plan = {
  segments: readonly StripSegment[];
  /** When the campaign is expected to end, ms. */
  endMs: number;
  /** The window that is shown, ms. */
  fromMs: number;
  toMs: number;
  /** The plan was cut before its end. */
  isCut: boolean;
};

/**
 * A campaign's segments for a lane: what is planned carried on at the pace that its expected end implies, an end mark, and only what
 * the window shows. A plan that was cut keeps its own pace and goes on as a dashed line to the end. Pure.
 */
export function laneSegments({ segments, endMs, fromMs, toMs, isCut }: Plan): StripSegment[] {
  const planned = segments.filter(({ planned: ahead }) => ahead);
  const first = planned[0];
  const last = planned.at(-1);
  const startMs = first ? Date.parse(first.from) : endMs;
  const plannedEndMs = last ? Date.parse(last.to) : startMs;
  const pace = !isCut && plannedEndMs > startMs && endMs > startMs ? (endMs - startMs) / (plannedEndMs - startMs) : 1;
  const at = (time: string) => iso(startMs + (Date.parse(time) - startMs) * pace);
  const drawn: StripSegment[] = segments.map((segment) => (segment.planned && pace !== 1 ? { ...segment, from: at(segment.from), to: at(segment.to) } : segment));
  if (isCut && plannedEndMs < endMs) drawn.push({ kind: "wait", planned: true, from: iso(plannedEndMs), to: iso(endMs), cycle: 0, label: "Further steps" });
  drawn.push({ kind: "end", planned: true, from: iso(endMs), to: iso(endMs), cycle: 0, label: "End" });
  return drawn.filter(({ from, to }) => Date.parse(to) >= fromMs && Date.parse(from) <= toMs);
}

const iso = (ms: number) => new Date(ms).toISOString();
