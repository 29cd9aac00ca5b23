import { formatNumber } from "@/lib/format";
import type { TraceLayout } from "./trace-geometry";

/** Ticks of the trace right of the present: nought, the half and the whole limit on the side where the data are. */
export function TraceAxis({ trace, x, width, limit, unit }: { trace: TraceLayout; x: number; width: number; limit?: number; unit: string }) {
  const [low, high] = trace.range;
  const side = -low > high ? -1 : 1;
  const step = limit ?? Math.max(-low, high) * 0.9;
  const ticks = [0, (side * step) / 2, side * step].filter((value) => value >= low && value <= high);
  const room = width - x;
  const place = room > 64 ? { tick: x + 1, text: x + 11, anchor: "start" as const } : { tick: x - 7, text: x - 11, anchor: "end" as const };
  return (
    <g aria-hidden="true">
      {ticks.map((value, i) => (
        <g key={value}>
          <path d={`M${place.tick} ${trace.y(value)}h6`} stroke="var(--ink3)" />
          <text className="halo" x={place.text} y={trace.y(value) + 4} textAnchor={place.anchor}>
            {formatNumber(value, { decimals: Math.abs(value) >= 10 || value === 0 ? 0 : 1 })}
            {i === 0 ? ` ${unit}` : limit !== undefined && Math.abs(value) === limit ? " limit" : ""}
          </text>
        </g>
      ))}
    </g>
  );
}
