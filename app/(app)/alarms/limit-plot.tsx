"use client";

import { useWidth } from "@/components/charts/use-width";
import type { AlarmSeries } from "@/lib/alarms/schema";
import { formatNumber } from "@/lib/format";
import { formatDayTime, formatRecent } from "@/lib/format-time";

type LimitPlotProps = { series: AlarmSeries; zone: string; /** The last value is beyond the limit still. */ breach: boolean };

const HEIGHT = 146;
const PLOT = { left: 44, right: 8, top: 32, bottom: 108 };

/** The watched values by time with the limit as dashed lines; the newest in the alarm colour while it needs a person. */
export function LimitPlot({ series: { label, unit, low, high, points }, zone, breach }: LimitPlotProps) {
  const [ref, width] = useWidth();
  const times = points.map(({ at }) => Date.parse(at));
  const values = points.map(({ value }) => value);
  const bounds = [low, high].filter((value) => value !== undefined);
  const [min, max] = widened(Math.min(...values, ...bounds), Math.max(...values, ...bounds));
  const [first, last] = [times[0], times[times.length - 1]];
  const x = (at: number) => PLOT.left + (last > first ? (at - first) / (last - first) : 0.5) * (width - PLOT.left - PLOT.right);
  const y = (value: number) => PLOT.bottom - ((value - min) / (max - min)) * (PLOT.bottom - PLOT.top);
  const said = (value: number) => formatNumber(Number(value.toPrecision(3)));
  const newest = points[points.length - 1];
  const text = `${label}: ${points.length} values, the newest ${said(newest.value)} ${unit}${high === undefined ? "" : `, limit ${low === undefined ? "" : `${said(low)} to `}${said(high)} ${unit}`}`;
  return (
    <div ref={ref} className="plot" style={{ minHeight: HEIGHT }}>
      {width > 0 && (
        <svg width={width} height={HEIGHT} role="img" aria-label={text}>
          <text className="label" x={PLOT.left} y={10}>{label} / {unit}</text>
          {bounds.map((bound) => (
            <g key={bound}>
              <path className="limit-line" d={`M${PLOT.left} ${y(bound)}H${width - PLOT.right}`} />
              <text x={PLOT.left - 6} y={y(bound) + 4} textAnchor="end">{said(bound)}</text>
            </g>
          ))}
          {high !== undefined && <text className="halo" x={PLOT.left + 2} y={y(high) - 5}>limit {said(high)} {unit}</text>}
          {(low ?? 0) <= 0 && min < 0 && max > 0 && <path className="grid-line" d={`M${PLOT.left} ${y(0)}H${width - PLOT.right}`} />}
          <path className="axis-line" d={`M${PLOT.left} ${PLOT.bottom + 4}H${width - PLOT.right}`} />
          {points.map(({ at, value }, i) => {
            const beyond = breach && i === points.length - 1;
            return <circle key={i} cx={x(times[i])} cy={y(value)} r={beyond ? 4 : 2.75} fill={beyond ? "var(--alarm)" : "var(--c2)"}><title>{`${formatDayTime(at, zone)}: ${said(value)} ${unit}`}</title></circle>;
          })}
          <text className={`halo strong`} x={Math.min(x(last), width - PLOT.right)} y={Math.max(PLOT.top + 4, y(newest.value) - 8)} textAnchor="end">{said(newest.value)}</text>
          <text x={PLOT.left} y={PLOT.bottom + 21}>{formatRecent(first, zone, last)}</text>
          {points.length > 1 && <text x={width - PLOT.right} y={PLOT.bottom + 21} textAnchor="end">{formatRecent(last, zone, last).replace("Today ", "")}</text>}
        </svg>
      )}
    </div>
  );
}

function widened(low: number, high: number): [number, number] {
  const room = (high - low || Math.abs(high) || 1) * 0.1;
  return [low - room, high + room];
}
