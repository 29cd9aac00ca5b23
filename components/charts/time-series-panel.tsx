import { scaleLinear } from "@visx/scale";
import { memo } from "react";
import { AxisY } from "./axes";
import { bucketStretches, type BucketColumn } from "./bucket-columns";
import { PointMark, penOf } from "./pens";
import { QuantityLabel } from "./plot-quantity";
import { rangeOf, roundTicks } from "./ticks";
import type { TimeAxis } from "./time-axis";
import { panelValues, type AxisPhase, type ModelPoint, type TimePanel, type TimeSeries } from "./time-series";

type PanelProps = { panel: TimePanel; axis: TimeAxis; phases?: readonly AxisPhase[]; left: number; right: number; top: number; height: number };

export const panelScale = (panel: TimePanel, top: number, height: number) =>
  scaleLinear<number>({ domain: rangeOf(panelValues(panel)) ?? [0, 1], range: [top + height, top] });

/** One quantity against time: min–max and mean a pixel column, phase values with bars, models with bands, limits. */
export const TimeSeriesPanel = memo(function TimeSeriesPanel({ panel, axis, phases, left, right, top, height }: PanelProps) {
  const y = panelScale(panel, top, height);
  const [low = 0, high = 1] = y.domain();
  const at = (value: number) => y(value).toFixed(1);
  const limits = panel.limits ?? [];
  return (
    <g>
      <AxisY scale={y} ticks={roundTicks(low, high, height < 90 ? 3 : 5)} left={left} right={right} />
      {panel.zero && <path d={`M${left} ${at(0)}H${right}`} stroke="var(--ink3)" />}
      {panel.series.map((series) => <Model key={series.id} model={series.model} axis={axis} at={at} band />)}
      {panel.series.map((series) => <Measured key={series.id} series={series} axis={axis} phases={phases} at={at} zero={panel.zero} />)}
      {panel.series.map((series) => <Model key={series.id} model={series.model} axis={axis} at={at} />)}
      {limits.map(({ value, label }) => (
        <g key={label}>
          <path className="limit-line" d={`M${left} ${at(value)}H${right}`} />
          <text className="halo" x={right - 2} y={y(value) + (y(value) > top + height / 2 ? -5 : 14)} textAnchor="end">{label}</text>
        </g>
      ))}
      {panel.notes?.map((note) => {
        const x = noteX(axis, Date.parse(note.at));
        return x === undefined ? null : (
          <g key={note.text}>
            <path d={`M${x} ${top + 2}V${top + height}`} stroke="var(--ink3)" strokeDasharray="2 2" />
            <text className="halo" x={x + (x > right - 160 ? -6 : 6)} y={top + 10} textAnchor={x > right - 160 ? "end" : "start"} style={{ fill: "var(--ink)" }}>{note.text}</text>
          </g>
        );
      })}
      <QuantityLabel quantity={panel.quantity} x={left} y={top - 10} />
    </g>
  );
});

/** A note in a closed gap stands at the break. */
function noteX(axis: TimeAxis, at: number): number | undefined {
  const inside = axis.place(at);
  if (inside !== undefined || axis.breaks.length === 0) return inside;
  const next = axis.pieces.findIndex(({ from }) => from > at);
  return next > 0 ? axis.breaks[next - 1]?.x : undefined;
}

type At = (value: number) => string;

function Measured({ series, axis, phases, at, zero }: { series: TimeSeries; axis: TimeAxis; phases?: readonly AxisPhase[]; at: At; zero?: boolean }) {
  const { colour, dash } = penOf(series.pen);
  const stretches = series.buckets ? bucketStretches(series.buckets, axis.place, phases) : [];
  const single = stretches.every((columns) => columns.every(({ n }) => n === 1));
  const all = stretches.flat();
  return (
    <g>
      {single && zero && <path d={all.map(({ x, mean }) => `M${x} ${at(0)}V${at(mean)}`).join("")} stroke={colour} />}
      {single && !zero && <path d={all.map(({ x, mean }) => `M${x} ${at(mean)}h0`).join("")} stroke={colour} strokeWidth="2.4" strokeLinecap="round" />}
      {!single && (
        <>
          <path d={all.filter(({ n }) => n > 1).map(({ x, low, high }) => `M${x} ${at(low)}V${at(high)}`).join("")} stroke={colour} strokeWidth="1.2" opacity=".45" />
          <path d={stretches.map((columns) => meanLine(columns, at)).join("")} fill="none" stroke={colour} strokeWidth="1.5" strokeLinejoin="round" strokeDasharray={series.pen === "ink" || series.pen === "points" ? undefined : dash} />
        </>
      )}
      {series.points?.map((point) => {
        const x = axis.place(Date.parse(point.at));
        if (x === undefined || !Number.isFinite(point.value)) return null;
        return (
          <g key={point.at} opacity={point.left ? 0.55 : undefined}>
            {point.u !== undefined && point.u > 0 && <path d={`M${x} ${at(point.value - 2 * point.u)}V${at(point.value + 2 * point.u)}`} stroke="var(--ink2)" />}
            <PointMark pen={series.pen} x={x} y={Number(at(point.value))} r={3.2} hollow={point.left} />
          </g>
        );
      })}
    </g>
  );
}

const meanLine = (columns: readonly BucketColumn[], at: At) =>
  columns.length === 1 ? `M${(columns[0]?.x ?? 0) - 1} ${at(columns[0]?.mean ?? 0)}h2` : `M${columns.map(({ x, mean }) => `${x} ${at(mean)}`).join("L")}`;

/** Drawn over the points; broken where the axis is. */
function Model({ model, axis, at, band }: { model?: readonly ModelPoint[]; axis: TimeAxis; at: At; band?: boolean }) {
  if (!model) return null;
  const pieces = axis.pieces.map((piece) => model.flatMap((point) => {
    const time = Date.parse(point.at);
    const x = time >= piece.from && time <= piece.to ? axis.place(time) : undefined;
    return x === undefined ? [] : [{ ...point, x }];
  })).filter((points) => points.length > 1);
  if (!band) return <path d={pieces.map((points) => `M${points.map(({ x, value }) => `${x.toFixed(1)} ${at(value)}`).join("L")}`).join("")} fill="none" stroke="var(--ink)" strokeWidth="1.75" />;
  const outlines = pieces.map((points) => {
    const sides = points.filter(({ low, high }) => low !== undefined && high !== undefined);
    if (sides.length < 2) return "";
    const upper = sides.map(({ x, high = 0 }) => `${x.toFixed(1)} ${at(high)}`);
    const lower = sides.map(({ x, low = 0 }) => `${x.toFixed(1)} ${at(low)}`).reverse();
    return `M${[...upper, ...lower].join("L")}Z`;
  });
  return <path d={outlines.join("")} fill="var(--band2)" />;
}
