"use client";

import { useRouter } from "next/navigation";
import { useMemo, useState, type KeyboardEvent } from "react";
import { useDragWindow } from "@/components/charts/use-drag-window";
import { useWidth } from "@/components/charts/use-width";
import { formatTime } from "@/lib/format-time";
import { layoutRuler, layoutWeeks } from "./ruler-geometry";
import { ShortCyclesZoom } from "./short-cycles-zoom";
import { moveCursor, placeAt, type StripMove, type StripPlace } from "./strip-cursor";
import { StripDrawing } from "./strip-drawing";
import { layoutStrip, timeScale, toTenth } from "./strip-geometry";
import { stripMeasures, type StripInput, type StripSize } from "./strip-input";
import { StripPhases } from "./strip-phases";
import { StripReading } from "./strip-reading";
import { DayGrid, DayLabels, NowFlag } from "./strip-ruler";
import { TraceAxis } from "./trace-axis";

export type RunStripProps = StripInput & {
  size: StripSize;
  /** What a screen reader says first: `Run of C-118 on North bench`. */
  label: string;
  /** IANA zone of the days. */
  zone: string;
  traceUnit?: string;
  /** A drag over the strip selects a window for all plots of the page. */
  onWindow?: (from: string, to: string) => void;
};

const MOVES: Record<string, readonly [StripMove, StripMove]> = {
  ArrowLeft: ["phase before", "repeat before"],
  ArrowRight: ["phase after", "repeat after"],
  Home: ["first", "first"],
  End: ["last", "last"],
};

/** Time to scale, height as the level of liquid in the cell; under it the air reference against its limit. */
export function RunStrip({ size, label, zone, traceUnit = "mHz", onWindow, from, to, now, segments, halt, silentSince, trace, limit }: RunStripProps) {
  const router = useRouter();
  const [ref, width] = useWidth();
  const [place, setPlace] = useState<StripPlace>();
  const input = useMemo<StripInput>(() => ({ from, to, now, segments, halt, silentSince, trace, limit }), [from, to, now, segments, halt, silentSince, trace, limit]);
  const layout = useMemo(() => (width > 0 ? layoutStrip(input, width, size) : undefined), [input, width, size]);
  const days = useMemo(() => (width > 0 && size !== "row" ? layoutRuler({ from, to, zone, now: size === "campaign" ? now : undefined }, width) : []), [from, to, zone, now, width, size]);

  const large = size === "campaign";
  const start = Date.parse(from);
  const timeAt = (x: number) => start + (x / width) * (Date.parse(to) - start);
  const iso = (x: number) => new Date(timeAt(x)).toISOString();
  const drag = useDragWindow({ width, onWindow: onWindow && ((x0, x1) => onWindow(iso(x0), iso(x1))), onMove: (x) => setPlace(placeAt(segments, timeAt(x))) });

  function onKeyDown(event: KeyboardEvent<SVGSVGElement>) {
    const move = MOVES[event.key];
    if (move) {
      event.preventDefault();
      setPlace(moveCursor(segments, place, move[event.shiftKey ? 1 : 0]));
    } else if (event.key === "Escape") setPlace(undefined);
    else if (event.key === "Enter" && place) {
      const href = segments[place.index]?.href;
      if (href) router.push(href);
    }
  }

  const height = stripMeasures(size, width, Boolean(trace?.length)).height;
  const cursorX = place && width > 0 ? toTenth(timeScale(from, to, width)(place.at)) : undefined;
  return (
    <div className="strip">
      <div ref={ref} style={{ minHeight: height }}>
        {layout && (
          <svg
            width={width}
            height={height}
            role="img"
            aria-label={label}
            {...(large && { tabIndex: 0, onKeyDown, ...drag.handlers })}
          >
            {size === "row"
              ? layoutWeeks(from, to, width).map(({ x }) => <path key={x} className="grid-line" d={`M${x} 0V${height}`} />)
              : <DayGrid days={days} top={large ? layout.measures.top - 4 : 0} height={large ? height - layout.measures.top + 4 : height} />}
            {large && <DayLabels days={days} y={layout.measures.top - 11} />}
            {drag.band && <rect x={drag.band.x0} y={layout.measures.top - 4} width={drag.band.x1 - drag.band.x0} height={height - layout.measures.top + 4} fill="var(--band2)" />}
            <StripDrawing layout={layout} haltOpen={halt?.open ?? false} />
            {layout.nowX !== undefined && <path d={`M${layout.nowX} ${large ? layout.measures.top - 4 : size === "row" ? 4 : 0}V${size === "row" ? 44 : height}`} stroke="var(--ink)" strokeWidth="1.5" />}
            {large && layout.nowX !== undefined && now && <NowFlag x={layout.nowX} y={2} text={formatTime(now, zone)} />}
            {large && layout.trace && <TraceAxis trace={layout.trace} x={Math.min(layout.nowX ?? width, layout.trace.zero.x1)} width={width} limit={limit} unit={traceUnit} />}
            {cursorX !== undefined && <path d={`M${cursorX} ${layout.measures.top - 2}V${height - 4}`} stroke="var(--ink)" strokeDasharray="2 2" />}
          </svg>
        )}
      </div>
      {large && layout && layout.blocks.length > 0 && <ShortCyclesZoom input={input} width={width} at={place?.at ?? (now ? Date.parse(now) : start)} />}
      {large && <StripReading input={input} place={place} zone={zone} unit={traceUnit} />}
      {size !== "row" && <StripPhases label={label} input={input} zone={zone} shown={large} />}
    </div>
  );
}
