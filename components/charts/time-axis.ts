/** Time axes of plots: true to scale, or with the time between phases closed up. Pure. */
import { formatDate, formatTime, localDaysBetween, localParts, startOfLocalDay } from "@/lib/format-time";
import type { Span } from "./bucket-columns";

export type TimeAxis = {
  /** Pixels of a time; nowhere when it lies outside, or in a gap that is closed. */
  place: (at: number) => number | undefined;
  /** The time at a pixel. */
  invert: (x: number) => number;
  /** Closed gaps: where the break stands, and the phases beside it. */
  breaks: { x: number; before: number; after: number }[];
  /** What the axis covers, one piece a phase when gaps are closed. */
  pieces: { from: number; to: number; x0: number; x1: number }[];
};

export function trueTimeAxis(from: string, to: string, x0: number, x1: number): TimeAxis {
  const start = Date.parse(from);
  const end = Date.parse(to);
  if (!(end > start)) throw new RangeError(`a time axis ends after it begins: ${from} to ${to}`);
  return {
    place: (at) => (at < start || at > end ? undefined : x0 + ((at - start) / (end - start)) * (x1 - x0)),
    invert: (x) => start + ((x - x0) / (x1 - x0)) * (end - start),
    breaks: [],
    pieces: [{ from: start, to: end, x0, x1 }],
  };
}

/** The phases one after another to one scale, `gap` pixels between them. Without a phase inside the window it is the true axis. */
export function closedTimeAxis(from: string, to: string, phases: readonly Span[], x0: number, x1: number, gap = 10): TimeAxis {
  const start = Date.parse(from);
  const end = Date.parse(to);
  const inside = phases
    .map((phase, index) => ({ from: Math.max(start, Date.parse(phase.from)), to: Math.min(end, Date.parse(phase.to)), index }))
    .filter((phase) => phase.to > phase.from)
    .sort((a, b) => a.from - b.from);
  if (inside.length === 0) return trueTimeAxis(from, to, x0, x1);

  const measured = inside.reduce((sum, phase) => sum + phase.to - phase.from, 0);
  const between = Math.min(gap, (x1 - x0) / (2 * inside.length));
  const scale = (x1 - x0 - between * (inside.length - 1)) / measured;
  let x = x0;
  const pieces = inside.map((phase) => {
    const piece = { from: phase.from, to: phase.to, x0: x, x1: x + (phase.to - phase.from) * scale };
    x = piece.x1 + between;
    return piece;
  });
  const breaks = pieces.slice(1).map((piece, i) => ({ x: piece.x0 - between / 2, before: inside[i]?.index ?? 0, after: inside[i + 1]?.index ?? 0 }));
  return {
    place: (at) => {
      const piece = pieces.find((p) => at >= p.from && at <= p.to);
      return piece && piece.x0 + (at - piece.from) * scale;
    },
    invert: (px) => {
      const piece = pieces.findLast((p) => p.x0 <= px) ?? pieces[0];
      return piece ? Math.max(piece.from, Math.min(piece.to, piece.from + (px - piece.x0) / scale)) : start;
    },
    breaks,
    pieces,
  };
}

export type TimeTick = { at: number; text: string; strong?: boolean };

const HOUR = 3_600_000;
const STEPS = [60_000, 5 * 60_000, 10 * 60_000, 30 * 60_000, HOUR, 3 * HOUR, 6 * HOUR, 12 * HOUR];

/** Ticks at round local times, about `apart` pixels from each other or more: minutes, hours, days, Mondays, months. */
export function timeTicks(from: string, to: string, zone: string, width: number, apart = 64): TimeTick[] {
  const start = Date.parse(from);
  const end = Date.parse(to);
  const leastStep = ((end - start) / Math.max(1, width)) * apart;
  const step = STEPS.find((candidate) => candidate >= leastStep);
  if (step) return withinDays(start, end, step, zone);

  const days = leastStep / (24 * HOUR);
  const midnights = localDaysBetween(from, to, zone).map((at) => ({ at, ...localParts(at, zone) }));
  const day = (at: number): TimeTick => ({ at, text: formatDate(at, zone) });
  if (days <= 1) return midnights.map(({ at }) => day(at));
  if (days <= 2) return midnights.filter((_, i) => i % 2 === 0).map(({ at }) => day(at));
  const mondays = midnights.filter(({ weekday }) => weekday === 1);
  for (const every of [1, 2, 4]) if (days <= 7 * every) return mondays.filter((_, i) => i % every === 0).map(({ at }) => day(at));
  const firsts = midnights.filter((m) => m.day === 1);
  const months = [1, 2, 3, 6, 12].find((every) => days <= 30 * every) ?? 12;
  return firsts.filter(({ month }) => (month - 1) % months === 0).map(({ at, month, year }) => ({ at, text: month === 1 ? String(year) : formatDate(at, zone).slice(2) }));
}

function withinDays(start: number, end: number, step: number, zone: string): TimeTick[] {
  const ticks: TimeTick[] = [];
  const dayStarts = [startOfLocalDay(start, zone), ...localDaysBetween(start, end, zone)];
  dayStarts.forEach((dayStart, i) => {
    const dayEnd = Math.min(end + 1, dayStarts[i + 1] ?? Infinity);
    for (let at = dayStart; at < dayEnd; at += step) {
      if (at < start) continue;
      ticks.push(at === dayStart ? { at, text: formatDate(at, zone), strong: true } : { at, text: formatTime(at, zone) });
    }
  });
  return ticks.filter(({ at }, i) => i === 0 || at !== ticks[i - 1]?.at);
}
