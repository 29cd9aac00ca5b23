import type { AxisPhase, ModelPoint, SeriesPoint, TimePanel } from "@/components/charts/time-series";
import type { DriftAnswer, SeriesAnswer } from "@/lib/analysis/schema";
import { formatNumber, formatUncertain } from "@/lib/format";
import { driftLine } from "../repeats-data";

const DAY_MS = 86_400_000;

/** How a plot writes a quantity: f0 as its difference in mHz, Q as its difference. */
export type Shown = { symbol: string; sub?: string; scale: number; unit?: string; reference: number };

export function shownAs(quantity: "f0" | "q", values: readonly { value: number }[]): Shown {
  const first = values[0]?.value ?? 0;
  return quantity === "f0" ? { symbol: "f", sub: "0", scale: 1000, unit: "mHz", reference: Math.round(first * 1e4) / 1e4 } : { symbol: "Q", scale: 1, reference: Math.round(first * 10) / 10 };
}

/** Value of the drift line at a time, in the unit of the values; undefined without a line. */
export function lineAt({ slopePerDay, intercept, from }: DriftAnswer, at: number): number | undefined {
  return slopePerDay === null || intercept === null || from === null ? undefined : intercept + (slopePerDay * (at - Date.parse(from))) / DAY_MS;
}

type Input = { name: string; drift: DriftAnswer; series: SeriesAnswer | undefined; temperature: SeriesAnswer | undefined; phases: readonly AxisPhase[]; shown: Shown };

/** A phase value stands at the middle of the repeats that made it; where these are not known, at the phase's beginning. */
export function middlesOf(series: SeriesAnswer | undefined): ReadonlyMap<string, string> {
  const spans = new Map<string, { from: number; to: number }>();
  for (const { phaseId, from, to } of series?.buckets ?? []) {
    const span = spans.get(phaseId);
    if (span) span.to = Date.parse(to);
    else spans.set(phaseId, { from: Date.parse(from), to: Date.parse(to) });
  }
  return new Map([...spans].map(([phaseId, { from, to }]) => [phaseId, new Date((from + to) / 2).toISOString()]));
}

/** Phase values with their drift line and steps, what is left about the line, and the cell's temperature: one time base. */
export function driftPanels({ name, drift, series, temperature, phases, shown }: Input): TimePanel[] {
  const { symbol, sub, scale, unit, reference } = shown;
  const shift = (value: number) => (value - reference) * scale;
  const start = drift.from === null ? Infinity : Date.parse(drift.from);
  const middles = middlesOf(series);
  const points = drift.values.map(({ at, value, u, phaseId }): SeriesPoint => ({ at: middles.get(phaseId) ?? at, value: shift(value), u: (u ?? 0) * scale, left: Date.parse(at) < start }));
  const residuals = drift.values.flatMap(({ at, value, u, phaseId }): SeriesPoint[] => {
    const line = lineAt(drift, Date.parse(at));
    return line === undefined || Date.parse(at) < start ? [] : [{ at: middles.get(phaseId) ?? at, value: (value - line) * scale, u: (u ?? 0) * scale }];
  });
  const model: ModelPoint[] | undefined = driftLine(drift, phases, shift);
  const less = `${formatNumber(reference, { decimals: symbol === "f" ? 4 : 1 })}${unit ? "\u00a0Hz" : ""}`;
  const panels: TimePanel[] = [
    {
      id: "values",
      quantity: { symbol, sub, less, unit },
      series: [{ id: "values", label: name, pen: "points", points, model }],
      notes: drift.steps.map(({ at, size, u }) => ({ at, text: `step ${formatUncertain(size * scale, u * scale, { signed: true })}` })),
    },
  ];
  if (residuals.length > 0) panels.push({ id: "residuals", quantity: { words: "left about the line", unit }, series: [{ id: "residuals", label: name, pen: "points", points: residuals }], zero: true, height: 90 });
  if (temperature && temperature.buckets.length > 0) panels.push({ id: "temperature", quantity: { words: "cell", unit: "°C" }, series: [{ id: "temperature", label: name, pen: "points", buckets: temperature.buckets }] });
  return panels;
}
