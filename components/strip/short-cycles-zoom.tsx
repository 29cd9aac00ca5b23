import { useMemo } from "react";
import { formatDuration } from "@/lib/format-time";
import { StripDrawing } from "./strip-drawing";
import { layoutStrip, timeScale, toTenth } from "./strip-geometry";
import type { StripInput } from "./strip-input";

const LEVEL = 66;
const FUNNEL = 30;

/** Three cycles around a time at a scale of their own, joined to their place by two hairlines. */
export function ShortCyclesZoom({ input, width, at }: { input: StripInput; width: number; at: number }) {
  const part = useMemo(() => threeCyclesAround(input, at), [input, at]);
  const layout = useMemo(() => part && layoutStrip(part, width, "campaign", { top: FUNNEL, level: LEVEL, height: FUNNEL + LEVEL + 22 }), [part, width]);
  if (!part || !layout) return null;

  const outer = timeScale(input.from, input.to, width);
  const x0 = toTenth(Math.max(0, outer(part.from)));
  const x1 = toTenth(Math.min(width, Math.max(outer(part.to), x0 + 2)));
  const bottom = FUNNEL + LEVEL;
  return (
    <svg width={width} height={bottom + 22} role="img" aria-label="Three cycles, enlarged">
      <path d={`M${x0} 0H${x1}`} stroke="var(--ink)" strokeWidth="1.5" />
      <path d={`M${x0} 0L.5 ${FUNNEL}V${bottom}M${x1} 0L${width - 0.5} ${FUNNEL}V${bottom}`} stroke="var(--rule3)" fill="none" />
      <StripDrawing layout={{ ...layout, cycles: [] }} haltOpen={input.halt?.open ?? false} />
      {layout.nowX !== undefined && <path d={`M${layout.nowX} ${FUNNEL}V${bottom}`} stroke="var(--ink)" strokeWidth="1.5" />}
      {layout.cycles.map(({ x, text, current }) => (
        <text key={x} x={x} y={bottom + 16} textAnchor="middle" className={current ? "strong" : undefined}>cycle {text}</text>
      ))}
      <text className="halo" x={width - 8} y={FUNNEL + 16} textAnchor="end">{formatDuration((Date.parse(part.to) - Date.parse(part.from)) / 1000)}</text>
    </svg>
  );
}

function threeCyclesAround(input: StripInput, at: number): StripInput | undefined {
  const spans = new Map<number, { from: string; to: string }>();
  for (const { cycle, from, to } of input.segments) {
    if (!cycle) continue;
    const span = spans.get(cycle);
    if (span) span.to = to;
    else spans.set(cycle, { from, to });
  }
  const cycles = [...spans.keys()];
  if (cycles.length === 0) return undefined;
  const here = Math.max(0, cycles.findLastIndex((cycle) => Date.parse(spans.get(cycle)?.from ?? "") <= at));
  const first = Math.max(0, Math.min(here - 1, cycles.length - 3));
  const shown = cycles.slice(first, first + 3);
  const from = spans.get(shown[0] ?? 0)?.from;
  const to = spans.get(shown[shown.length - 1] ?? 0)?.to;
  if (!from || !to || Date.parse(to) <= Date.parse(from)) return undefined;
  return { from, to, now: input.now, halt: input.halt, silentSince: input.silentSince, segments: input.segments.filter((segment) => Date.parse(segment.to) > Date.parse(from) && Date.parse(segment.from) < Date.parse(to)) };
}
