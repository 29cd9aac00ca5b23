import type { TimePanel, AxisPhase, ModelPoint } from "@/components/charts/time-series";
import type { DriftAnswer, SeriesAnswer } from "@/lib/analysis/schema";
import { formatNumber } from "@/lib/format";

const DAY_MS = 86_400_000;

/** What the plot of f0 takes off its values: the baseline in air, else the first phase value, to 0.1 mHz. Undefined without values. */
export function referenceOf({ baselineHz, drift, series }: { baselineHz: number | null | undefined; drift: DriftAnswer | undefined; series: SeriesAnswer | undefined }): number | undefined {
  const hz = baselineHz ?? drift?.values[0]?.value ?? series?.buckets[0]?.mean;
  return hz === undefined ? undefined : Math.round(hz * 1e4) / 1e4;
}

/** The phases that the buckets lie in, from first to last repeat; empty when buckets reach over phases. */
export function phasesOf({ buckets }: SeriesAnswer, letterOf: (phaseId: string) => string | undefined): AxisPhase[] {
  const phases = new Map<string, { from: number; to: number }>();
  for (const { phaseId, from, to } of buckets) {
    const phase = phases.get(phaseId);
    if (phase) phase.to = Date.parse(to);
    else phases.set(phaseId, { from: Date.parse(from), to: Date.parse(to) });
  }
  return [...phases].map(([phaseId, { from, to }]) => ({ from: new Date(from).toISOString(), to: new Date(Math.max(to, from + 1000)).toISOString(), letter: letterOf(phaseId) }));
}

type PanelsInput = {
  name: string;
  f0: SeriesAnswer;
  q: SeriesAnswer | undefined;
  temperature: SeriesAnswer | undefined;
  drift: DriftAnswer | undefined;
  referenceHz: number;
  /** Half-width of the return limit about the reference; air only. */
  limitMHz: number | null;
  phases: readonly AxisPhase[];
};

/** f0 as shift with its drift line, Q, and the cell's temperature, one over the other. */
export function panelsOf({ name, f0, q, temperature, drift, referenceHz, limitMHz, phases }: PanelsInput): TimePanel[] {
  const shift = (hz: number) => (hz - referenceHz) * 1000;
  const buckets = f0.buckets.map(({ from, to, min, max, mean, n }) => ({ from, to, min: shift(min), max: shift(max), mean: shift(mean), n }));
  const panels: TimePanel[] = [
    {
      id: "f0",
      quantity: { symbol: "f", sub: "0", less: `${formatNumber(referenceHz, { decimals: 4 })}\u00a0Hz`, unit: "mHz" },
      series: [{ id: "f0", label: name, pen: "points", buckets, model: drift && driftLine(drift, phases, shift) }],
      limits: limitMHz === null ? [] : limitsNear(buckets, limitMHz),
    },
  ];
  if (q && q.buckets.length > 0) panels.push({ id: "q", quantity: { symbol: "Q" }, series: [{ id: "q", label: name, pen: "points", buckets: q.buckets }] });
  if (temperature && temperature.buckets.length > 0) panels.push({ id: "temperature", quantity: { words: "cell", unit: "°C" }, series: [{ id: "temperature", label: name, pen: "points", buckets: temperature.buckets }] });
  return panels;
}

/** The limit on the side where the values go, once they have gone a third of the way: before, it would only flatten the plot. */
function limitsNear(buckets: readonly { min: number; max: number }[], limit: number) {
  const low = buckets.reduce((least, { min }) => Math.min(least, min), 0);
  const high = buckets.reduce((most, { max }) => Math.max(most, max), 0);
  return [low < -limit / 3 ? -limit : 0, high > limit / 3 ? limit : 0].filter((value) => value !== 0).map((value) => ({ value, label: `limit ${formatNumber(value, { decimals: Math.abs(value) < 10 ? 1 : 0 })} mHz` }));
}

/** The drift line over each phase of its mount, with the 95 % band of its slope about the mean time of the phase values. */
export function driftLine({ slopePerDay, intercept, from, lower, upper, values }: DriftAnswer, phases: readonly AxisPhase[], shift: (hz: number) => number): ModelPoint[] | undefined {
  if (slopePerDay === null || intercept === null || from === null || lower === null || upper === null || values.length === 0) return undefined;
  const start = Date.parse(from);
  const own = values.filter(({ at }) => Date.parse(at) >= start);
  const pivot = own.reduce((sum, { at }) => sum + Date.parse(at) / own.length, 0);
  const point = (time: number): ModelPoint => {
    const value = intercept + (slopePerDay * (time - start)) / DAY_MS;
    const days = (time - pivot) / DAY_MS;
    const ends = [value + (lower - slopePerDay) * days, value + (upper - slopePerDay) * days].map(shift).sort((a, b) => a - b);
    return { at: new Date(time).toISOString(), value: shift(value), low: ends[0], high: ends[1] };
  };
  return phases.filter((phase) => Date.parse(phase.from) >= start).flatMap((phase) => [point(Date.parse(phase.from)), point(Date.parse(phase.to))]);
}
