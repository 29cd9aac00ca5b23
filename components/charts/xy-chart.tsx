"use client";

import { localPoint } from "@visx/event";
import { scaleLinear, scaleLog } from "@visx/scale";
import { useState, type KeyboardEvent, type MouseEvent, type ReactNode } from "react";
import { HATCH } from "@/components/strip/tint";
import { formatNumber, formatUncertain } from "@/lib/format";
import { AxisX, AxisY } from "./axes";
import { logRange } from "./deviation";
import { dashOf, PointMark, penOf, type Dash, type Pen } from "./pens";
import { Plot } from "./plot";
import { QuantityLabel, quantityText, type PlotQuantity } from "./plot-quantity";
import { decadeTicks, minorTicks, rangeOf, roundTicks } from "./ticks";
import { useWidth } from "./use-width";

/** `u` is a standard uncertainty: its bar is k = 2. Hollow: outside a claim. Left: not in the fit. */
export type XyPoint = { x: number; y: number; u?: number; hollow?: boolean; left?: boolean; name?: string };
export type XyLine = { x: number; y: number; low?: number; high?: number };
export type XySeries = { id: string; label: string; pen: Pen; dash?: Dash; points?: readonly XyPoint[]; line?: readonly XyLine[] };

export type XyChartProps = {
  label: string;
  sentence?: ReactNode;
  file: string;
  x: PlotQuantity;
  y: PlotQuantity;
  series: readonly XySeries[];
  /** Written at the right end of their line. */
  yLimits?: readonly { value: number; label: string }[];
  /** Dashed verticals: a flash point less 5 °C, the end of a mount. */
  xLimits?: readonly { value: number; label: string }[];
  /** Arrows that stand on the x axis: set-points in use. */
  xMarks?: readonly { value: number; label: string }[];
  /** Stretches of x that nothing is claimed for: hatched. */
  outside?: readonly [number, number][];
  xRange?: [number, number];
  yRange?: [number, number];
  logX?: boolean;
  logY?: boolean;
  zero?: boolean;
  height?: number;
  /** One unit has the same length on both axes, as in the complex plane; the height follows. */
  equal?: boolean;
  /** A press on a point, or Enter where the cursor stands, opens what it stands for. */
  onOpen?: (point: XyPoint) => void;
};

const NEAR_PX = 14;

const TOP = 22;
/** A vertical limit is named at its right, nearer to the right end at its left. */
const LABEL_PX = 110;

/** Any quantity against another: points with bars, models with their band, limits, and what is not claimed. */
export function XyChart({ label, sentence, file, x, y, series, yLimits = [], xLimits = [], xMarks = [], outside = [], xRange, yRange, logX, logY, zero, height = 168, equal, onOpen }: XyChartProps) {
  const [ref, width] = useWidth();
  const [cursor, setCursor] = useState<number>();
  const left = 50;
  const right = width - 6;

  const xs = series.flatMap(({ points = [], line = [] }) => [...points.map((point) => point.x), ...line.map((point) => point.x)]);
  const ys = series.flatMap(({ points = [], line = [] }) => [
    ...points.flatMap((point) => [point.y - 2 * (point.u ?? 0), point.y + 2 * (point.u ?? 0)]),
    ...line.flatMap((point) => [point.low ?? point.y, point.high ?? point.y]),
  ]);
  const xDomain = xRange ?? (logX ? logRange(xs) : (rangeOf([...xs, ...xLimits.map(({ value }) => value)], 0.04) ?? [0, 1]));
  const yDomain = yRange ?? (logY ? logRange(ys) : (rangeOf([...ys, ...yLimits.map(({ value }) => value), ...(zero ? [0] : [])]) ?? [0, 1]));
  const inner = equal && !logX && !logY ? ((right - left) * (yDomain[1] - yDomain[0])) / (xDomain[1] - xDomain[0]) : height;
  const bottom = TOP + Math.max(40, Number.isFinite(inner) ? inner : height);
  const placeX = (logX ? scaleLog<number> : scaleLinear<number>)({ domain: xDomain, range: [left, right] });
  const placeY = (logY ? scaleLog<number> : scaleLinear<number>)({ domain: yDomain, range: [bottom, TOP] });
  const axisY = bottom + 4;

  const stops = series.flatMap((one) => (one.points ?? []).map((point) => ({ point, name: one.label }))).sort((a, b) => a.point.x - b.point.x);
  const here = cursor === undefined ? undefined : stops[cursor];

  function onKeyDown(event: KeyboardEvent) {
    const last = stops.length - 1;
    if (event.key === "Escape") setCursor(undefined);
    if (event.key === "Enter" && onOpen && here) onOpen(here.point);
    const next = { ArrowRight: Math.min(last, (cursor ?? -1) + 1), ArrowLeft: Math.max(0, (cursor ?? last + 1) - 1), Home: 0, End: last }[event.key];
    if (next === undefined || last < 0) return;
    event.preventDefault();
    setCursor(next);
  }

  function onClick(event: MouseEvent<SVGSVGElement>) {
    const at = localPoint(event.currentTarget, event);
    if (!onOpen || !at) return;
    const distance = ({ point }: (typeof stops)[number]) => Math.hypot(placeX(point.x) - at.x, placeY(point.y) - at.y);
    const nearest = stops.reduce<(typeof stops)[number] | undefined>((best, stop) => (!best || distance(stop) < distance(best) ? stop : best), undefined);
    if (nearest && distance(nearest) <= NEAR_PX) onOpen(nearest.point);
  }

  const reading = here && (
    <>
      <b>{here.point.name ?? here.name}</b>&ensp;{quantityText(x)} <span className="value">{inSix(here.point.x)}</span>&ensp;{quantityText(y)}{" "}
      <span className="value">{here.point.u ? formatUncertain(here.point.y, here.point.u) : inSix(here.point.y)}</span>
    </>
  );
  return (
    <Plot label={label} sentence={sentence} file={file} twin={() => xyTwin(x, y, series)} reading={reading}>
      <div ref={ref} style={{ minHeight: bottom + 44 }}>
        {width > 0 && (
          <svg width={width} height={bottom + 44} role="img" aria-label={label} tabIndex={0} onKeyDown={onKeyDown} onClick={onOpen && onClick} className={onOpen && "cursor-pointer"} onBlur={() => setCursor(undefined)}>
            {outside.map(([from, to]) => {
              const x0 = Math.max(left, placeX(from));
              return <rect key={from} x={x0} y={TOP} width={Math.max(0, Math.min(right, placeX(to)) - x0)} height={bottom - TOP} fill={HATCH} opacity=".6" />;
            })}
            <AxisY scale={placeY} ticks={logY ? decadeTicks(...yDomain, 5) : roundTicks(...yDomain, inner < 90 ? 3 : 5)} left={left} right={right} powers={logY} />
            <AxisX scale={placeX} ticks={logX ? decadeTicks(...xDomain) : roundTicks(...xDomain, width < 400 ? 4 : 6)} minor={logX ? minorTicks(...xDomain) : []} top={axisY} powers={logX} gridFrom={equal ? TOP : undefined} />
            {zero && <path d={`M${left} ${placeY(0)}H${right}`} stroke="var(--ink3)" />}
            {series.map((one) => <Line key={one.id} series={one} x={placeX} y={placeY} />)}
            {series.map((one) => <Points key={one.id} series={one} x={placeX} y={placeY} />)}
            {yLimits.map(({ value, label: text }) => (
              <g key={text}>
                <path className="limit-line" d={`M${left} ${placeY(value)}H${right}`} />
                <text className="halo" x={right} y={placeY(value) - 5} textAnchor="end">{text}</text>
              </g>
            ))}
            {xLimits.map(({ value, label: text }) => (
              <g key={text}>
                <path className="limit-line" d={`M${placeX(value)} ${TOP}V${bottom}`} />
                <text className="halo" x={placeX(value) + (placeX(value) > right - LABEL_PX ? -5 : 5)} y={TOP + 10} textAnchor={placeX(value) > right - LABEL_PX ? "end" : "start"}>{text}</text>
              </g>
            ))}
            {xMarks.map(({ value, label: text }) => (
              <path key={text} d={`M${placeX(value)} ${bottom}v-9m-3.5 3.5l3.5 -3.5l3.5 3.5`} fill="none" stroke="var(--ink)" strokeWidth="1.6"><title>{text}</title></path>
            ))}
            {here && <circle cx={placeX(here.point.x)} cy={placeY(here.point.y)} r="6.5" fill="none" stroke="var(--ink)" strokeWidth="1.6" />}
            <QuantityLabel quantity={y} x={left} y={10} />
            <QuantityLabel quantity={x} x={right} y={axisY + 37} anchor="end" />
          </svg>
        )}
      </div>
    </Plot>
  );
}

const inSix = (value: number) => formatNumber(Number(value.toPrecision(6)));

type DrawingProps = { series: XySeries; x: (value: number) => number; y: (value: number) => number };

/** A model in ink, its band under it; broken where a value is missing. */
function Line({ series, x, y }: DrawingProps) {
  const { line, pen } = series;
  if (!line || line.length < 2) return null;
  const at = (a: number, b: number) => `${x(a).toFixed(1)} ${y(b).toFixed(1)}`;
  const sides = line.filter(({ low, high }) => low !== undefined && high !== undefined);
  const band = [...sides.map((point) => at(point.x, point.high ?? point.y)), ...sides.map((point) => at(point.x, point.low ?? point.y)).reverse()];
  const strokes = line.map((point, i) => (Number.isFinite(point.y) ? `${i > 0 && Number.isFinite(line[i - 1]?.y) ? "L" : "M"}${at(point.x, point.y)}` : ""));
  return (
    <g>
      {band.length > 3 && <path d={`M${band.join("L")}Z`} fill={pen === "ink" || pen === "points" ? "var(--band2)" : penOf(pen).colour} opacity={pen === "ink" || pen === "points" ? undefined : 0.15} />}
      <path d={strokes.join("")} fill="none" stroke={pen === "points" ? "var(--ink)" : penOf(pen).colour} strokeWidth="1.75" strokeDasharray={pen === "points" ? undefined : dashOf(series)} />
    </g>
  );
}

const MANY = 60;

function Points({ series: { points = [], pen }, x, y }: DrawingProps) {
  const drawn = points.filter((point) => Number.isFinite(point.x) && Number.isFinite(point.y));
  if (drawn.length > MANY) {
    const dots = (left: boolean) => drawn.filter((point) => Boolean(point.left) === left).map((point) => `M${x(point.x).toFixed(1)} ${y(point.y).toFixed(1)}h0`).join("");
    return (
      <g strokeLinecap="round" strokeWidth="2.6">
        <path d={dots(true)} stroke="var(--rule3)" />
        <path d={dots(false)} stroke={penOf(pen).colour} opacity=".8" />
      </g>
    );
  }
  return (
    <g>
      {drawn.map((point, i) => (
        <g key={i} opacity={point.left ? 0.5 : undefined}>
          {point.u !== undefined && point.u > 0 && <path d={`M${x(point.x)} ${y(point.y - 2 * point.u)}V${y(point.y + 2 * point.u)}`} stroke="var(--ink2)" />}
          <PointMark pen={pen} x={x(point.x)} y={y(point.y)} r={3.2} hollow={point.hollow ?? point.left} />
        </g>
      ))}
    </g>
  );
}

function xyTwin(x: PlotQuantity, y: PlotQuantity, series: readonly XySeries[]) {
  const right = true;
  return {
    columns: [{ head: "series" }, { head: "kind" }, { head: quantityText(x), right }, { head: quantityText(y), right }, { head: "u", right }, { head: "low", right }, { head: "high", right }],
    rows: series.flatMap(({ label, points = [], line = [] }) => [
      ...points.map((point) => [label, point.left ? "left out" : point.hollow ? "not claimed" : "measured", point.x, point.y, point.u ?? null, null, null]),
      ...line.map((point) => [label, "model", point.x, point.y, null, point.low ?? null, point.high ?? null]),
    ]),
  };
}
