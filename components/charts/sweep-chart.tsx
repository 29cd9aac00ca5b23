"use client";

import { scaleLinear } from "@visx/scale";
import { useState, type KeyboardEvent, type ReactNode } from "react";
import { formatNumber } from "@/lib/format";
import { AxisX, AxisY } from "./axes";
import { stackPanels } from "./panel-places";
import { Plot } from "./plot";
import { QuantityLabel, quantityText, type PlotQuantity } from "./plot-quantity";
import { rangeOf, roundTicks } from "./ticks";
import { useWidth } from "./use-width";

/** One curve over frequency: as measured, and the fitted model at the same frequencies. */
export type SweepPanel = { quantity: PlotQuantity; measured: readonly number[]; model?: readonly number[]; height?: number; ticks?: readonly number[] };

export type SweepChartProps = {
  label: string;
  sentence?: ReactNode;
  file: string;
  frequencyHz: readonly number[];
  /** Amplitude, and phase where it is wanted. */
  panels: readonly SweepPanel[];
  /** Dots, and rings for the second. */
  residuals?: { quantity: PlotQuantity; inPhase: readonly number[]; quadrature?: readonly number[] };
  f0Hz?: number;
  q?: number;
  /** Values written in the upper right corner, as drawn text: `f₀ 1 098.421 7(49) Hz`. */
  corner?: readonly { symbol: string; sub?: string; text: string }[];
};

const LEFT = 50;

/** A sweep: points as measured, the fit over them, residuals in a strip of their own on the same x. */
export function SweepChart({ label, sentence, file, frequencyHz, panels, residuals, f0Hz, q, corner }: SweepChartProps) {
  const [ref, width] = useWidth();
  const [cursor, setCursor] = useState<number>();
  const right = width - 4;
  const x = scaleLinear<number>({ domain: rangeOf(frequencyHz, 0) ?? [0, 1], range: [LEFT, right] });
  const [x0 = 0, x1 = 1] = x.domain();

  const heights = panels.map((panel, i) => panel.height ?? (i === 0 ? 186 : 94));
  const { tops, bottom: modelBottom } = stackPanels(heights, 22, 28);
  const places = panels.map((panel, i) => {
    const top = tops[i] ?? 0;
    const domain = rangeOf([...panel.measured, ...(panel.model ?? []), ...(i === 0 ? [0] : [])]) ?? [0, 1];
    return { panel, top, y: scaleLinear<number>({ domain, range: [top + (heights[i] ?? 0), top] }) };
  });
  const residualTop = modelBottom + 36;
  const bottom = residuals ? residualTop + 70 : modelBottom;
  const residualY = scaleLinear<number>({ domain: rangeOf([0, ...(residuals?.inPhase ?? []), ...(residuals?.quadrature ?? [])]) ?? [-1, 1], range: [bottom, residualTop] });
  const axisY = bottom + 6;
  const marks = f0Hz === undefined ? [] : q ? [f0Hz - f0Hz / (2 * q), f0Hz, f0Hz + f0Hz / (2 * q)] : [f0Hz];

  function onKeyDown(event: KeyboardEvent) {
    const last = frequencyHz.length - 1;
    const step = event.shiftKey ? 10 : 1;
    if (event.key === "Escape") setCursor(undefined);
    const next = { ArrowRight: Math.min(last, (cursor ?? -1) + step), ArrowLeft: Math.max(0, (cursor ?? last + 1) - step), Home: 0, End: last }[event.key];
    if (next === undefined || last < 0) return;
    event.preventDefault();
    setCursor(next);
  }

  const here = cursor === undefined ? undefined : frequencyHz[cursor];
  const dots = (values: readonly number[], y: (value: number) => number) => frequencyHz.map((f, i) => (Number.isFinite(values[i]) ? `M${x(f).toFixed(1)} ${y(values[i] ?? 0).toFixed(1)}h0` : "")).join("");
  const rings = (values: readonly number[], y: (value: number) => number, r: number) => frequencyHz.map((f, i) => (Number.isFinite(values[i]) ? `M${(x(f) - r).toFixed(1)} ${y(values[i] ?? 0).toFixed(1)}a${r} ${r} 0 1 0 ${2 * r} 0a${r} ${r} 0 1 0 ${-2 * r} 0` : "")).join("");
  const reading = here !== undefined && cursor !== undefined && (
    <>
      <b>{formatNumber(here)} Hz</b>
      {panels.map((panel) => <span key={quantityText(panel.quantity)}>&ensp;{quantityText(panel.quantity)} <span className="value">{formatNumber(Number((panel.measured[cursor] ?? NaN).toPrecision(6)))}</span></span>)}
      {residuals && <>&ensp;{quantityText(residuals.quantity)} <span className="value">{formatNumber(Number((residuals.inPhase[cursor] ?? NaN).toPrecision(3)), { signed: true })}</span></>}
    </>
  );
  return (
    <Plot label={label} sentence={sentence} file={file} twin={() => sweepTwin(frequencyHz, panels, residuals)} reading={reading}>
      <div ref={ref} style={{ minHeight: axisY + 48 }}>
        {width > 0 && (
          <svg width={width} height={axisY + 46} role="img" aria-label={label} tabIndex={0} onKeyDown={onKeyDown} onBlur={() => setCursor(undefined)}>
            <AxisX scale={x} ticks={roundTicks(x0, x1, width < 400 ? 4 : 6)} top={axisY} gridFrom={22} />
            {marks.map((f) => f > x0 && f < x1 && <path key={f} d={`M${x(f)} 22V${modelBottom}`} stroke="var(--ink3)" strokeDasharray="2 2" opacity={f === f0Hz ? 1 : 0.7} />)}
            {places.map(({ panel, top, y }) => (
              <g key={top}>
                <AxisY scale={y} ticks={panel.ticks ?? roundTicks(y.domain()[0] ?? 0, y.domain()[1] ?? 1, top > 60 ? 3 : 4)} left={LEFT} right={right} />
                <path d={rings(panel.measured, y, frequencyHz.length > 150 ? 1.5 : 2)} fill="none" stroke="var(--c2)" />
                {panel.model && <path d={`M${frequencyHz.map((f, i) => `${x(f).toFixed(1)} ${y(panel.model?.[i] ?? 0).toFixed(1)}`).join("L")}`} fill="none" stroke="var(--ink)" strokeWidth="1.75" />}
                <QuantityLabel quantity={panel.quantity} x={LEFT} y={top - 8} />
              </g>
            ))}
            {residuals && (
              <g>
                <AxisY scale={residualY} ticks={roundTicks(residualY.domain()[0] ?? -1, residualY.domain()[1] ?? 1, 3)} left={LEFT} right={right} format={(value) => formatNumber(value, { signed: true })} />
                <path d={`M${LEFT} ${residualY(0)}H${right}`} stroke="var(--ink3)" />
                {residuals.quadrature && <path d={rings(residuals.quadrature, residualY, 1.5)} fill="none" stroke="var(--ink3)" strokeWidth=".8" />}
                <path d={dots(residuals.inPhase, residualY)} stroke="var(--c2)" strokeWidth="2.6" strokeLinecap="round" />
                <QuantityLabel quantity={residuals.quantity} x={LEFT} y={residualTop - 9} />
              </g>
            )}
            {corner?.map(({ symbol, sub, text }, i) => (
              <text key={symbol} className="label halo" x={right} y={30 + i * 19} textAnchor="end">
                <tspan className="symbol">{symbol}</tspan>{sub && <><tspan dy="3" className="subscript">{sub}</tspan><tspan dy="-3">{"\u200b"}</tspan></>} {text}
              </text>
            ))}
            {here !== undefined && <path d={`M${x(here)} 16V${bottom}`} stroke="var(--ink)" strokeDasharray="2 2" />}
            <QuantityLabel quantity={{ words: "frequency", unit: "Hz" }} x={right} y={axisY + 40} anchor="end" />
          </svg>
        )}
      </div>
    </Plot>
  );
}

function sweepTwin(frequencyHz: readonly number[], panels: readonly SweepPanel[], residuals: SweepChartProps["residuals"]) {
  const right = true;
  const sides = residuals ? [{ name: "in phase", values: residuals.inPhase }, ...(residuals.quadrature ? [{ name: "quadrature", values: residuals.quadrature }] : [])] : [];
  return {
    columns: [
      { head: "frequency / Hz", right },
      ...panels.flatMap(({ quantity, model }) => [{ head: quantityText(quantity), right }, ...(model ? [{ head: `${quantityText(quantity)}, fit`, right }] : [])]),
      ...sides.map(({ name }) => ({ head: `${residuals ? quantityText(residuals.quantity) : ""}, ${name}`, right })),
    ],
    rows: frequencyHz.map((f, i) => [f, ...panels.flatMap(({ measured, model }) => [measured[i] ?? null, ...(model ? [model[i] ?? null] : [])]), ...sides.map(({ values }) => values[i] ?? null)]),
  };
}
