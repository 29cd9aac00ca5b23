import type { Tint } from "./tint";

export type SegmentKind = "air" | "fill" | "liquid" | "clean" | "dry" | "held" | "wait" | "end";

/** One stretch of a campaign, past or planned. Times are ISO strings. */
export type StripSegment = {
  kind: SegmentKind;
  from: string;
  to: string;
  planned?: boolean;
  letter?: string;
  tint?: Tint;
  cycle?: number;
  /** In words: `Air reference`, `2-Propanol`. */
  label: string;
  /** Repeats of a phase: planned in all, and taken so far. */
  repeats?: number;
  taken?: number;
  /** Mean f₀ of the phase with its uncertainty and unit, written out. */
  mean?: string;
  /** Where Enter goes. */
  href?: string;
};

/** A repeat of an air phase, or its mean: the shift against the first air phase. */
export type TracePoint = { at: string; value: number; u?: number };

export type StripSize = "row" | "today" | "campaign";

export type StripInput = {
  from: string;
  to: string;
  now?: string;
  /** In the order of time. */
  segments: readonly StripSegment[];
  /** The moment it halted; `open` while it needs a person. */
  halt?: { at: string; open: boolean };
  /** The agent has been silent since: what lies behind is not known. */
  silentSince?: string;
  trace?: readonly TracePoint[];
  /** Half-width of the limit of the trace, in its unit. */
  limit?: number;
};

export type StripMeasures = { height: number; top: number; level: number; headroom: number; traceGap: number; trace: number; letterFrom: number; large: boolean };

/** Heights of look.md: list row 18 + 10 in 48, Today 32 + 28 in 92 (78 on a phone), campaign 70 + 92 under a ruler. */
export function stripMeasures(size: StripSize, width: number, hasTrace: boolean): StripMeasures {
  const phone = width < 500;
  if (size === "row") return { height: 48, top: hasTrace ? 7 : 14, level: 18, headroom: 2, traceGap: 8, trace: hasTrace ? 10 : 0, letterFrom: 12, large: false };
  if (size === "today") return { height: phone ? 78 : 92, top: phone ? 6 : 13, level: 32, headroom: 2, traceGap: 8, trace: hasTrace ? 28 : 0, letterFrom: phone ? 17 : 14, large: false };
  return { height: 26 + 70 + 22 + (hasTrace ? 92 + 10 : 0), top: 26, level: 70, headroom: 8, traceGap: 22, trace: hasTrace ? 92 : 0, letterFrom: 14, large: true };
}
