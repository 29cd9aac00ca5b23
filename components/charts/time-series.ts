import type { Bucket } from "./bucket-columns";
import type { Pen } from "./pens";
import type { PlotQuantity } from "./plot-quantity";

/** A phase value: its bar is k = 2. `left` is shown in grey: it is not part of the fit. */
export type SeriesPoint = { at: string; value: number; u?: number; left?: boolean };
/** A fitted line, with its 95 % band where it is known. */
export type ModelPoint = { at: string; value: number; low?: number; high?: number };

export type TimeSeries = { id: string; label: string; pen: Pen; buckets?: readonly Bucket[]; points?: readonly SeriesPoint[]; model?: readonly ModelPoint[] };
export type LimitLine = { value: number; label: string };
export type PlotNote = { at: string; text: string };

export type TimePanel = {
  id: string;
  quantity: PlotQuantity;
  series: readonly TimeSeries[];
  limits?: readonly LimitLine[];
  /** Steps and the like, written beside a hairline at their time. */
  notes?: readonly PlotNote[];
  height?: number;
  /** A line at nought, for residuals. */
  zero?: boolean;
};

/** A phase of the axis; `letter` is what stands under the break before it when gaps are closed. */
export type AxisPhase = { from: string; to: string; letter?: string; label?: string };

/** All values of a panel that its y axis must hold. */
export function* panelValues({ series, limits = [], zero }: TimePanel): Generator<number> {
  if (zero) yield 0;
  for (const { value } of limits) yield value;
  for (const { buckets = [], points = [], model = [] } of series) {
    for (const { min, max } of buckets) { yield min; yield max; }
    for (const { value, u = 0 } of points) { yield value - 2 * u; yield value + 2 * u; }
    for (const { value, low = value, high = value } of model) { yield low; yield high; }
  }
}
