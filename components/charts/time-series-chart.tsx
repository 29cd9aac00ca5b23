"use client";

import { memo, useMemo, useState, type KeyboardEvent, type ReactNode } from "react";
import { formatCount, formatNumber, formatUncertain } from "@/lib/format";
import { formatDate, formatDayTime } from "@/lib/format-time";
import { placesWithRoom, stackPanels } from "./panel-places";
import { Plot } from "./plot";
import { quantityText } from "./plot-quantity";
import { closedTimeAxis, timeTicks, trueTimeAxis, type TimeAxis } from "./time-axis";
import { panelScale, TimeSeriesPanel } from "./time-series-panel";
import { nearestStop, panelStops, timeSeriesTwin } from "./time-series-twin";
import type { AxisPhase, TimePanel } from "./time-series";
import { useDragWindow } from "./use-drag-window";
import { useWidth } from "./use-width";

export type TimeSeriesChartProps = {
  label: string;
  sentence?: ReactNode;
  file: string;
  /** One over the other on one time axis; the first is the main one. */
  panels: readonly TimePanel[];
  from: string;
  to: string;
  zone: string;
  /** Lines never cross from one phase to the next. */
  phases?: readonly AxisPhase[];
  /** Closes the time between phases; needs `phases`. */
  closeGaps?: boolean;
  /** A drag, or + and − at the cursor, asks for another window. */
  onWindow?: (from: string, to: string) => void;
  /** The whole there is; offered when the window is less. */
  whole?: { from: string; to: string };
  /** A press, or Enter at the cursor, opens what stands there. */
  onOpen?: (at: number) => void;
};

const LEFT = 52;
const PANEL_GAP = 30;
const HEADROOM = 22;
const HEIGHTS = [202, 64, 64];

/** Quantities against time, smooth at tens of thousands of repeats: what is drawn is one column a pixel. */
export function TimeSeriesChart({ label, sentence, file, panels, from, to, zone, phases, closeGaps, onWindow, whole, onOpen }: TimeSeriesChartProps) {
  const [ref, width] = useWidth();
  const [cursor, setCursor] = useState<number>();
  const left = width < 500 ? 42 : LEFT;
  const right = width - 4;

  const axis = useMemo<TimeAxis | undefined>(() => {
    if (right <= left) return undefined;
    return closeGaps && phases ? closedTimeAxis(from, to, phases, left, right, width < 500 ? 5 : 10) : trueTimeAxis(from, to, left, right);
  }, [closeGaps, phases, from, to, left, right, width]);

  const stops = useMemo(() => (axis ? panelStops(panels[0], axis, phases) : []), [panels, axis, phases]);
  const heights = panels.map((panel, i) => panel.height ?? HEIGHTS[i] ?? 64);
  const { tops, bottom } = stackPanels(heights, HEADROOM, PANEL_GAP);
  const [mainPanel, mainTop = 0, mainHeight = 0] = [panels[0], tops[0], heights[0]];
  const mainScale = useMemo(() => mainPanel && panelScale(mainPanel, mainTop, mainHeight), [mainPanel, mainTop, mainHeight]);
  const closed = (axis?.breaks.length ?? 0) > 0;
  const axisY = bottom + 6;
  const height = axisY + (closed ? 40 : 24);

  const window = (a: number, b: number) => onWindow?.(new Date(a).toISOString(), new Date(b).toISOString());
  const open = (place: number | undefined) => {
    const at = place === undefined ? undefined : stops[place]?.at;
    if (at !== undefined) onOpen?.(at);
  };
  const drag = useDragWindow({
    left,
    width: right - left,
    onWindow: onWindow && axis && ((x0, x1) => window(axis.invert(x0), axis.invert(x1))),
    onMove: (x) => setCursor(nearestStop(stops, x)),
    onLeave: () => setCursor(undefined),
    onPress: () => open(cursor),
  });

  function onKeyDown(event: KeyboardEvent) {
    const here = cursor ?? -1;
    const next = nextStop(event, here, stops);
    if (next !== undefined) {
      event.preventDefault();
      setCursor(next);
    } else if (event.key === "Escape") setCursor(undefined);
    else if (event.key === "Enter") open(cursor);
    else if ((event.key === "+" || event.key === "-") && onWindow) {
      const middle = stops[here]?.at ?? (Date.parse(from) + Date.parse(to)) / 2;
      const half = ((Date.parse(to) - Date.parse(from)) / 2) * (event.key === "+" ? 0.5 : 2);
      const least = whole ? Date.parse(whole.from) : -Infinity;
      const most = whole ? Date.parse(whole.to) : Infinity;
      window(Math.max(least, middle - half), Math.min(most, middle + half));
    }
  }

  const stop = cursor === undefined ? undefined : stops[cursor];
  const part = whole && (whole.from !== from || whole.to !== to);
  const reading = (
    <>
      {stop && panels[0] && (
        <>
          <b>{formatDayTime(stop.at, zone, to)}</b>&ensp;{quantityText(panels[0].quantity)}{" "}
          <span className="value">{stop.u ? formatUncertain(stop.value, stop.u) : inFive(stop.value)}</span>
          {stop.n > 1 && `, from ${inFive(stop.low)} to ${inFive(stop.high)} in ${formatCount(stop.n)} repeats`}
        </>
      )}
      {part && whole && onWindow && <>{stop && " "}<button type="button" className="underline underline-offset-[3px]" onClick={() => onWindow(whole.from, whole.to)}>Whole run</button></>}
    </>
  );
  return (
    <Plot label={label} sentence={sentence} file={file} twin={() => timeSeriesTwin(panels)} reading={reading}>
      <div ref={ref} style={{ minHeight: height }}>
        {axis && (
          <svg width={width} height={height} role="img" aria-label={label} tabIndex={0} onKeyDown={onKeyDown} {...drag.handlers}>
            {drag.band && <rect x={drag.band.x0} width={drag.band.x1 - drag.band.x0} y={HEADROOM} height={bottom - HEADROOM} fill="var(--band2)" />}
            {panels.map((panel, i) => <TimeSeriesPanel key={panel.id} panel={panel} axis={axis} phases={phases} left={left} right={right} top={tops[i] ?? 0} height={heights[i] ?? 0} />)}
            <BottomAxis axis={axis} phases={phases} from={from} to={to} zone={zone} y={axisY} />
            {stop && mainScale && (
              <g aria-hidden="true">
                <path d={`M${stop.x} ${HEADROOM - 6}V${bottom}`} stroke="var(--ink)" strokeDasharray="2 2" />
                <circle cx={stop.x} cy={mainScale(stop.value)} r="4" fill="var(--paper)" stroke="var(--ink)" strokeWidth="1.6" />
              </g>
            )}
          </svg>
        )}
      </div>
    </Plot>
  );
}

const inFive = (value: number) => formatNumber(Number(value.toPrecision(5)));

function nextStop(event: KeyboardEvent, here: number, stops: readonly { stretch: number }[]): number | undefined {
  const last = stops.length - 1;
  if (last < 0) return undefined;
  if (event.key === "Home") return 0;
  if (event.key === "End") return last;
  if (event.key !== "ArrowLeft" && event.key !== "ArrowRight") return undefined;
  const step = event.key === "ArrowRight" ? 1 : -1;
  if (here < 0) return step > 0 ? 0 : last;
  if (!event.shiftKey) return Math.max(0, Math.min(last, here + step));
  const stretch = stops[here]?.stretch ?? 0;
  const found = step > 0 ? stops.findIndex((stop) => stop.stretch > stretch) : stops.findLastIndex((stop) => stop.stretch < stretch);
  return found < 0 ? here : found;
}

/** True time: ticks at round local times. Closed: a line a phase, its date, and under each break the letter of what happened in it. */
const BottomAxis = memo(function BottomAxis({ axis, phases, from, to, zone, y }: { axis: TimeAxis; phases?: readonly AxisPhase[]; from: string; to: string; zone: string; y: number }) {
  if (axis.breaks.length === 0) {
    const [piece] = axis.pieces;
    const ticks = timeTicks(from, to, zone, (piece?.x1 ?? 0) - (piece?.x0 ?? 0));
    return (
      <g>
        <path className="axis-line" d={`M${piece?.x0 ?? 0} ${y}H${piece?.x1 ?? 0}${ticks.map(({ at }) => `M${axis.place(at)?.toFixed(1)} ${y}v4`).join("")}`} />
        {ticks.map(({ at, text, strong }) => <text key={at} x={axis.place(at)} y={y + 17} textAnchor="middle" className={strong ? "strong" : undefined}>{text}</text>)}
      </g>
    );
  }
  const middles = axis.pieces.map(({ x0, x1 }) => (x0 + x1) / 2);
  const roomy = placesWithRoom(middles, 46);
  return (
    <g>
      {axis.pieces.map((piece, i) => (
        <g key={piece.from}>
          <path className="axis-line" d={`M${piece.x0} ${y}H${piece.x1}`} />
          {roomy[i] && <text x={middles[i]} y={y + 15} textAnchor="middle">{formatDate(piece.from, zone)}</text>}
        </g>
      ))}
      {axis.breaks.map(({ x, after }) => (
        <g key={x}>
          <path d={`M${x - 2} ${y + 4}l4 -8`} stroke="var(--ink3)" />
          {phases?.[after]?.letter && <text className="strong" x={x} y={y + 30} textAnchor="middle">{phases[after]?.letter}</text>}
        </g>
      ))}
    </g>
  );
});
