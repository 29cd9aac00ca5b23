/** What the cursor of a strip stands on, and where it goes. Pure. */
import type { StripInput, StripSegment, TracePoint } from "./strip-input";

/** A place on the strip: a segment, and the repeat in it (from 1) where it has repeats. */
export type StripPlace = { index: number; at: number; repeat?: number };

const start = (segment: StripSegment) => Date.parse(segment.from);
const end = (segment: StripSegment) => Date.parse(segment.to);

export const isPhase = ({ kind }: StripSegment): boolean => kind === "air" || kind === "liquid";

function repeatAt(segment: StripSegment, at: number): number | undefined {
  if (!segment.repeats) return undefined;
  const share = (at - start(segment)) / Math.max(1, end(segment) - start(segment));
  return Math.max(1, Math.min(segment.repeats, Math.floor(share * segment.repeats) + 1));
}

const timeOfRepeat = (segment: StripSegment, repeat: number) => start(segment) + ((repeat - 0.5) / (segment.repeats ?? 1)) * (end(segment) - start(segment));

/** The place at a time; outside all segments, nothing. */
export function placeAt(segments: readonly StripSegment[], at: number): StripPlace | undefined {
  const index = segments.findIndex((segment) => segment.kind !== "end" && start(segment) <= at && at < end(segment));
  const segment = segments[index];
  return segment && { index, at, repeat: repeatAt(segment, at) };
}

const middleOf = (segments: readonly StripSegment[], index: number): StripPlace | undefined => {
  const segment = segments[index];
  if (!segment) return undefined;
  const at = (start(segment) + end(segment)) / 2;
  return { index, at, repeat: repeatAt(segment, at) };
};

export type StripMove = "phase before" | "phase after" | "repeat before" | "repeat after" | "first" | "last";

/** Left and right step phases, Shift steps repeats and goes over into the next phase; Home and End go to the ends. Stays where there is no further. */
export function moveCursor(segments: readonly StripSegment[], place: StripPlace | undefined, move: StripMove): StripPlace | undefined {
  const phases = segments.flatMap((segment, index) => (isPhase(segment) ? [index] : []));
  if (phases.length === 0) return undefined;
  const first = phases[0] ?? 0;
  const last = phases[phases.length - 1] ?? 0;
  if (move === "first") return middleOf(segments, first);
  if (move === "last") return middleOf(segments, last);
  if (!place) return middleOf(segments, move.endsWith("before") ? last : first);

  const segment = segments[place.index];
  const back = move.endsWith("before");
  const neighbour = back ? phases.findLast((index) => index < place.index) : phases.find((index) => index > place.index);
  if (move.startsWith("repeat") && segment?.repeats && place.repeat) {
    const repeat = place.repeat + (back ? -1 : 1);
    if (repeat >= 1 && repeat <= segment.repeats) return { index: place.index, repeat, at: timeOfRepeat(segment, repeat) };
    const next = neighbour === undefined ? undefined : segments[neighbour];
    if (next?.repeats && neighbour !== undefined) {
      const entry = back ? next.repeats : 1;
      return { index: neighbour, repeat: entry, at: timeOfRepeat(next, entry) };
    }
  }
  return neighbour === undefined ? place : middleOf(segments, neighbour);
}

/** The trace's value at a place in an air phase: the nearest point of the same phase. */
export function traceAt({ segments, trace }: StripInput, place: StripPlace): TracePoint | undefined {
  const segment = segments[place.index];
  if (segment?.kind !== "air" || segment.planned || !trace) return undefined;
  let nearest: TracePoint | undefined;
  for (const point of trace) {
    const at = Date.parse(point.at);
    if (at < start(segment) || at > end(segment)) continue;
    if (!nearest || Math.abs(at - place.at) < Math.abs(Date.parse(nearest.at) - place.at)) nearest = point;
  }
  return nearest;
}

/** `cycle 4, air reference, repeat 81 of 120` */
export function placeInWords(segments: readonly StripSegment[], place: StripPlace): string {
  const segment = segments[place.index];
  if (!segment) return "";
  const parts = [
    segment.cycle ? `cycle ${segment.cycle}` : "",
    segment.cycle && segment.kind !== "liquid" ? segment.label.charAt(0).toLowerCase() + segment.label.slice(1) : segment.label,
    place.repeat && segment.repeats ? `repeat ${place.repeat} of ${segment.repeats}` : "",
    segment.planned ? "planned" : "",
  ];
  return parts.filter(Boolean).join(", ");
}
