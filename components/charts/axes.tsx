import { AxisBottom, AxisLeft } from "@visx/axis";
import { GridColumns, GridRows } from "@visx/grid";
import type { ComponentProps, ReactElement } from "react";
import { formatNumber, MINUS } from "@/lib/format";

type Scale = ComponentProps<typeof AxisLeft>["scale"];

type AxisYProps = {
  scale: Scale;
  ticks: readonly number[];
  left: number;
  right: number;
  format?: (value: number) => string;
  /** Powers of ten with a raised exponent. */
  powers?: boolean;
};

/** Numbers at the left and hairlines across; no line of its own. */
export function AxisY({ scale, ticks, left, right, format, powers }: AxisYProps) {
  return (
    <>
      <GridRows scale={scale as ComponentProps<typeof GridRows>["scale"]} left={left} width={right - left} tickValues={[...ticks]} className="grid-line" stroke="var(--grid)" />
      <AxisLeft
        scale={scale}
        left={left}
        tickValues={[...ticks]}
        hideAxisLine
        hideTicks
        tickComponent={({ x, y, formattedValue }) => <TickText x={x - 2} y={y + 4} anchor="end" text={formattedValue ?? ""} powers={powers} />}
        tickFormat={(value) => (powers ? String(Math.round(Math.log10(Number(value)))) : (format ?? plain(ticks))(Number(value)))}
      />
    </>
  );
}

type AxisXProps = {
  scale: Scale;
  ticks: readonly number[];
  top: number;
  /** Upper end of the grid lines; without it there are none. */
  gridFrom?: number;
  format?: (value: number) => string;
  powers?: boolean;
  minor?: readonly number[];
};

/** A line with 4 px ticks, numbers under it. */
export function AxisX({ scale, ticks, top, gridFrom, format, powers, minor = [] }: AxisXProps) {
  const place = scale as unknown as (value: number) => number;
  return (
    <>
      {gridFrom !== undefined && (
        <GridColumns scale={scale as ComponentProps<typeof GridColumns>["scale"]} top={gridFrom} height={top - gridFrom} tickValues={[...ticks]} className="grid-line" stroke="var(--grid)" />
      )}
      <path className="axis-line" d={minor.map((value) => `M${place(value).toFixed(1)} ${top}v3`).join("")} />
      <AxisBottom
        scale={scale}
        top={top}
        tickValues={[...ticks]}
        tickLength={4}
        axisLineClassName="axis-line"
        stroke="var(--ink3)"
        tickStroke="var(--ink3)"
        tickComponent={({ x, y, formattedValue }) => <TickText x={x} y={y + 5} anchor="middle" text={formattedValue ?? ""} powers={powers} />}
        tickFormat={(value) => (powers ? String(Math.round(Math.log10(Number(value)))) : (format ?? plain(ticks))(Number(value)))}
      />
    </>
  );
}

function TickText({ x, y, anchor, text, powers }: { x: number; y: number; anchor: "middle" | "end"; text: string; powers?: boolean }): ReactElement {
  return (
    <text x={x} y={y} textAnchor={anchor}>
      {powers ? <>10<tspan dy="-5" className="subscript">{text.replace("-", MINUS)}</tspan></> : text}
    </text>
  );
}

/** Decimals that part the ticks, the same for all of them. */
const plain = (ticks: readonly number[]) => {
  const decimals = tickDecimals(ticks);
  return (value: number) => formatNumber(value, { decimals });
};

export function tickDecimals(ticks: readonly number[]): number {
  let step = Infinity;
  for (let i = 1; i < ticks.length; i++) step = Math.min(step, Math.abs((ticks[i] ?? 0) - (ticks[i - 1] ?? 0)));
  if (!Number.isFinite(step) || step === 0) return 0;
  for (let decimals = 0; decimals < 12; decimals++) {
    if (ticks.every((tick) => Math.abs(tick - Number(tick.toFixed(decimals))) < step * 1e-6)) return decimals;
  }
  return 12;
}
