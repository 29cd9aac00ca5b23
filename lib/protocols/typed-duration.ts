import { duration } from "@/lib/protocol/labels";

const UNIT_S: Readonly<Record<string, number>> = { s: 1, sec: 1, min: 60, m: 60, h: 3600, d: 86_400, day: 86_400, days: 86_400 };

/**
 * Seconds of a time as people type it: `90`, `90 s`, `10 min`, `1 h 30 min`, `1.5 d`, `1,5 h`. Nothing typed is undefined;
 * what is no time comes back as the text itself, for the schema to refuse.
 */
export function parseDuration(typed: string): number | string | undefined {
  const text = typed.trim().replaceAll(",", ".").toLowerCase();
  if (text === "") return undefined;
  if (/^\d+(\.\d+)?$/.test(text)) return Number(text);
  const parts = [...text.matchAll(/(\d+(?:\.\d+)?)\s*([a-z]+)\s*/g)];
  const isWhole = parts.reduce((length, [part]) => length + part.length, 0) === text.length;
  if (parts.length === 0 || !isWhole || parts.some(([, , unit]) => !Object.hasOwn(UNIT_S, unit))) return typed;
  const seconds = parts.reduce((sum, [, n, unit]) => sum + Number(n) * UNIT_S[unit], 0);
  return Math.round(seconds * 1000) / 1000;
}

/** The other way: `1 h 30 min`; anything that is no time as it is. */
export function showDuration(value: unknown): string {
  if (typeof value === "number" && Number.isFinite(value) && value >= 0) return parseDuration(duration(value)) === value ? duration(value) : `${value} s`;
  return value === undefined || value === null ? "" : String(value);
}
