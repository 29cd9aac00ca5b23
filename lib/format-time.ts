/** Times as they stand on the page, in the zone of the laboratory or rig. Pure: zone and present are arguments. */
import { THIN_SPACE, formatNumber } from "./format";

export type Instant = string | number | Date;

const DAY_NAMES = ["Sun", "Mon", "Tue", "Wed", "Thu", "Fri", "Sat"];
const MONTH_NAMES = ["Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"];
const NBSP = "\u00a0";

export type LocalParts = { year: number; month: number; day: number; hour: number; minute: number; second: number; weekday: number };

const formatters = new Map<string, Intl.DateTimeFormat>();

function formatterFor(zone: string): Intl.DateTimeFormat {
  let formatter = formatters.get(zone);
  if (!formatter) {
    formatter = new Intl.DateTimeFormat("en-GB", {
      timeZone: zone, hourCycle: "h23", year: "numeric", month: "numeric", day: "numeric", hour: "numeric", minute: "numeric", second: "numeric",
    });
    formatters.set(zone, formatter);
  }
  return formatter;
}

/** The wall clock in `zone`; months 1 to 12, weekday 0 = Sunday. Throws RangeError for an unknown zone or an invalid time. */
export function localParts(at: Instant, zone: string): LocalParts {
  const parts = { year: 0, month: 0, day: 0, hour: 0, minute: 0, second: 0 };
  for (const { type, value } of formatterFor(zone).formatToParts(new Date(at))) {
    if (type in parts) parts[type as keyof typeof parts] = Number(value);
  }
  return { ...parts, weekday: new Date(Date.UTC(parts.year, parts.month - 1, parts.day)).getUTCDay() };
}

const two = (n: number) => String(n).padStart(2, "0");

/** `06:18` */
export function formatTime(at: Instant, zone: string): string {
  const { hour, minute } = localParts(at, zone);
  return `${two(hour)}:${two(minute)}`;
}

/** `06:18:04` */
export function formatSecond(at: Instant, zone: string): string {
  const { hour, minute, second } = localParts(at, zone);
  return `${two(hour)}:${two(minute)}:${two(second)}`;
}

/** `Thu 14 May`, and the year when it is not the year of `now`. Without `now` the year stands always. */
export function formatDay(at: Instant, zone: string, now?: Instant): string {
  const { year, month, day, weekday } = localParts(at, zone);
  const text = `${DAY_NAMES[weekday]} ${day} ${MONTH_NAMES[month - 1]}`;
  return now !== undefined && localParts(now, zone).year === year ? text : `${text} ${year}`;
}

/** `Thu 14 May 06:18` */
export const formatDayTime = (at: Instant, zone: string, now?: Instant): string => `${formatDay(at, zone, now)} ${formatTime(at, zone)}`;

/** `14 May`, for rulers and axes. */
export function formatDate(at: Instant, zone: string): string {
  const { month, day } = localParts(at, zone);
  return `${day} ${MONTH_NAMES[month - 1]}`;
}

/** `Today 08:15`, within six days back `Wed 14:59`, else `Mon 4 May 02:10`. */
export function formatRecent(at: Instant, zone: string, now: Instant): string {
  const then = localParts(at, zone);
  const today = localParts(now, zone);
  const daysBack = (Date.UTC(today.year, today.month - 1, today.day) - Date.UTC(then.year, then.month - 1, then.day)) / 86_400_000;
  if (daysBack === 0) return `Today ${formatTime(at, zone)}`;
  if (daysBack > 0 && daysBack <= 6) return `${DAY_NAMES[then.weekday]} ${formatTime(at, zone)}`;
  return formatDayTime(at, zone, now);
}

/** `4 s`, `12 min`, `3 h 24 min`, `2 d 5 h`: at most two units, the smaller left out when nought. Negative spans are given by their size. */
export function formatDuration(seconds: number): string {
  if (!Number.isFinite(seconds)) return "unknown";
  const s = Math.abs(seconds);
  if (s < 59.5) return `${Math.round(s)}${NBSP}s`;
  const minutes = Math.round(s / 60);
  if (minutes < 60) return `${minutes}${NBSP}min`;
  if (minutes < 48 * 60) return pair(Math.floor(minutes / 60), "h", minutes % 60, "min");
  const hours = Math.round(s / 3600);
  return pair(Math.floor(hours / 24), "d", hours % 24, "h");
}

const pair = (a: number, unitA: string, b: number, unitB: string) => `${formatNumber(a, { decimals: 0 })}${NBSP}${unitA}` + (b ? ` ${b}${NBSP}${unitB}` : "");

/** `9 days 5 hours`, for sentences. */
export function formatDurationInWords(seconds: number): string {
  if (!Number.isFinite(seconds)) return "unknown";
  const unit = (n: number, name: string) => `${formatNumber(n, { decimals: 0 })} ${name}${n === 1 ? "" : "s"}`;
  const join = (a: string, b: string | false) => (b ? `${a} ${b}` : a);
  const minutes = Math.round(Math.abs(seconds) / 60);
  if (minutes < 60) return unit(minutes, "minute");
  if (minutes < 24 * 60) return join(unit(Math.floor(minutes / 60), "hour"), minutes % 60 > 0 && unit(minutes % 60, "minute"));
  const hours = Math.round(minutes / 60);
  return join(unit(Math.floor(hours / 24), "day"), hours % 24 > 0 && unit(hours % 24, "hour"));
}

/** `4 s ago`, `in 4 h 8 min`, `now`. */
export function formatAgo(at: Instant, now: Instant): string {
  const seconds = (new Date(now).getTime() - new Date(at).getTime()) / 1000;
  if (Math.abs(seconds) < 0.5) return "now";
  return seconds > 0 ? `${formatDuration(seconds)} ago` : `in ${formatDuration(seconds)}`;
}

/** `± 3 h`, `± 2 d`: half a range, in whole units. */
export function formatPlusMinus(seconds: number): string {
  const s = Math.abs(seconds);
  if (!Number.isFinite(s)) return "";
  const [n, unit] = s < 5400 ? [s / 60, "min"] : s < 2 * 86_400 ? [s / 3600, "h"] : [s / 86_400, "d"];
  return `±${THIN_SPACE}${Math.max(1, Math.round(n))}${NBSP}${unit}`;
}

/** The first instant of the local day of `at`, as milliseconds; where midnight does not exist, the first instant after the gap. */
export function startOfLocalDay(at: Instant, zone: string): number {
  const { year, month, day } = localParts(at, zone);
  return localMidnight(Date.UTC(year, month - 1, day), zone);
}

/** All starts of local days in (from, to), as milliseconds. */
export function localDaysBetween(from: Instant, to: Instant, zone: string): number[] {
  const { year, month, day } = localParts(from, zone);
  const start = new Date(from).getTime();
  const end = new Date(to).getTime();
  const days: number[] = [];
  for (let n = 0; ; n++) {
    const midnight = localMidnight(Date.UTC(year, month - 1, day + n), zone);
    if (midnight >= end) return days;
    if (midnight >= start) days.push(midnight);
  }
}

function localMidnight(wallClock: number, zone: string): number {
  const offsetAt = (instant: number) => {
    const p = localParts(instant, zone);
    return Date.UTC(p.year, p.month - 1, p.day, p.hour, p.minute, p.second) - Math.floor(instant / 1000) * 1000;
  };
  const early = wallClock - offsetAt(wallClock - 86_400_000);
  const late = wallClock - offsetAt(wallClock + 86_400_000);
  const fits = (instant: number) => instant + offsetAt(instant) === wallClock;
  const candidates = [early, late].filter(fits);
  return candidates.length > 0 ? Math.min(...candidates) : Math.max(early, late);
}
