/** Several runs one after the other on a rig's own axis of time: where each run, its name, its range and what is blocked stand. Pure. */
import { layoutStrip, timeScale, toTenth, type StripLayout } from "./strip-geometry";
import type { StripInput, StripMeasures, StripSegment } from "./strip-input";

export type LaneRun = {
  key: string;
  segments: readonly StripSegment[];
  from: string;
  /** Its end, as far as it is known, and the likely range of it. */
  to: string;
  range?: { earliest: string; latest: string } | null;
  halt?: StripInput["halt"];
};

export type LaneInput = {
  from: string;
  to: string;
  now: string;
  runs: readonly LaneRun[];
  blocked: readonly { id: string; from: string; to: string; why: string }[];
  /** Where a person is needed. */
  rings?: readonly { at: string; label: string }[];
};

export type LaneLayout = {
  height: number;
  base: number;
  roof: number;
  nowX?: number;
  runs: { key: string; layout: StripLayout; x0: number; x1: number; nameWidth: number; whisker?: { x0: number; x1: number; cutLeft: boolean; cutRight: boolean } }[];
  blocked: { id: string; x0: number; x1: number; why: string; hasRoom: boolean }[];
  rings: { x: number; label: string; hasRoom: boolean }[];
};

const TOP = 28;
const LEVEL = 29;
const RINGS_PX = 22;
const NARROWEST_NAME_PX = 24;
const RING_LABEL_PX = 7;

export function layoutLane({ from, to, now, runs, blocked, rings = [] }: LaneInput, width: number): LaneLayout {
  const x = timeScale(from, to, width);
  const inside = (at: string) => toTenth(Math.max(0, Math.min(width, x(at))));
  const base = TOP + LEVEL;
  const roof = TOP + 2;
  const measures: Partial<StripMeasures> = { top: TOP, level: LEVEL, headroom: 2, height: base + 18, large: false, letterFrom: 14 };
  const shown = runs.filter((run) => x(run.to) > 0 && x(run.from) < width);
  return {
    height: base + 18 + (rings.length > 0 ? RINGS_PX : 0),
    base,
    roof,
    nowX: x(now) >= 0 && x(now) <= width ? toTenth(x(now)) : undefined,
    runs: shown.map((run, i) => {
      const x0 = inside(run.from);
      const next = shown[i + 1];
      const room = (next ? inside(next.from) : width) - x0 - 6;
      return {
        key: run.key,
        layout: layoutStrip({ from, to, now, segments: run.segments, halt: run.halt }, width, "today", measures),
        x0,
        x1: inside(run.to),
        nameWidth: room >= NARROWEST_NAME_PX ? toTenth(room) : 0,
        ...(run.range && x(run.range.latest) > 0 && x(run.range.earliest) < width
          ? { whisker: { x0: inside(run.range.earliest), x1: inside(run.range.latest), cutLeft: x(run.range.earliest) < 0, cutRight: x(run.range.latest) > width } }
          : {}),
      };
    }),
    blocked: blocked
      .filter((window) => x(window.to) > 0 && x(window.from) < width)
      .map(({ id, why, ...window }) => ({ id, why, x0: inside(window.from), x1: inside(window.to), hasRoom: !shown.some((run) => x(run.from) < x(window.from) + why.length * 6.2 && x(run.to) > x(window.from)) })),
    rings: placeRings(rings, x, width),
  };
}

/** Names stand beside their rings where they reach into no other ring and not beyond the end. */
function placeRings(rings: readonly { at: string; label: string }[], x: (at: string) => number, width: number): LaneLayout["rings"] {
  const places = rings.map(({ at, label }) => ({ x: x(at), label })).filter((ring) => ring.x >= 0 && ring.x <= width).toSorted((a, b) => a.x - b.x);
  return places.map((ring, i) => {
    const needed = ring.label.length * RING_LABEL_PX + 14;
    const right = (places[i + 1]?.x ?? width) - ring.x;
    return { x: toTenth(ring.x), label: ring.label, hasRoom: right >= needed };
  });
}
