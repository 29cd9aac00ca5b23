/** The table of a time series, and the places its cursor stops at. Pure. */
import { bucketStretches, type Span } from "./bucket-columns";
import type { Twin, TwinRow } from "./plot";
import { quantityText } from "./plot-quantity";
import type { TimeAxis } from "./time-axis";
import type { TimePanel } from "./time-series";

export type Stop = { x: number; at: number; value: number; low: number; high: number; n: number; u?: number; stretch: number };

/** Columns and points of the panel's first series that is drawn, from left to right. */
export function panelStops(panel: TimePanel | undefined, axis: TimeAxis, phases?: readonly Span[]): Stop[] {
  const [series] = panel?.series ?? [];
  if (!series) return [];
  const columns = bucketStretches(series.buckets ?? [], axis.place, phases).flatMap((stretch, index) =>
    stretch.map(({ x, at, mean, low, high, n }) => ({ x, at, value: mean, low, high, n, stretch: index })),
  );
  const points = (series.points ?? []).flatMap(({ at, value, u }, index) => {
    const x = axis.place(Date.parse(at));
    return x === undefined || !Number.isFinite(value) ? [] : [{ x, at: Date.parse(at), value, low: value, high: value, n: 1, u, stretch: index }];
  });
  return [...columns, ...points].sort((a, b) => a.x - b.x);
}

/** Place of the stop nearest to a pixel; halves the range at each step. */
export function nearestStop(stops: readonly { x: number }[], x: number): number | undefined {
  if (stops.length === 0) return undefined;
  let low = 0;
  let high = stops.length - 1;
  while (low < high) {
    const middle = (low + high) >> 1;
    if ((stops[middle]?.x ?? 0) < x) low = middle + 1;
    else high = middle;
  }
  const before = stops[low - 1];
  return before && x - before.x < (stops[low]?.x ?? Infinity) - x ? low - 1 : low;
}

/** Every bucket and point of every series, in the order of the panels. Times are UTC. */
export function timeSeriesTwin(panels: readonly TimePanel[]): Pick<Twin, "columns" | "rows"> {
  const rows: TwinRow[] = panels.flatMap((panel) =>
    panel.series.flatMap((series) => [
      ...(series.buckets ?? []).map(({ from, to, mean, min, max, n }): TwinRow => [quantityText(panel.quantity), series.label, from, to, mean, null, min, max, n]),
      ...(series.points ?? []).map(({ at, value, u }): TwinRow => [quantityText(panel.quantity), series.label, at, at, value, u ?? null, null, null, 1]),
    ]),
  );
  const right = true;
  return {
    columns: [{ head: "quantity" }, { head: "series" }, { head: "from" }, { head: "to" }, { head: "value", right }, { head: "u", right }, { head: "lowest", right }, { head: "highest", right }, { head: "n", right }],
    rows,
  };
}
