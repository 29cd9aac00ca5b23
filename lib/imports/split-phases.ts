import { median } from "@/lib/numerics/statistics/median";

/** Rows of a file that belong together, by what stands in their columns. */
export type RowKeys = {
  /** ms since 1970. */
  at: Float64Array;
  /** A number for each medium. */
  medium: Int32Array;
  /** As the file says; undefined without such a column. */
  cycle?: Int32Array;
  /** °C; NaN where none. */
  setPointC?: Float64Array;
};

/** Rows `order[from]` … `order[to − 1]`. */
export type PhaseRows = { from: number; to: number; medium: number; cycle: number; setPointC: number | null };

/** A gap of more than so many median spacings ends a phase. */
const GAP = 5;

/** Rows in order of time, equal times as in the file. */
export function orderByTime(at: Float64Array): Uint32Array {
  const order = Uint32Array.from(at, (_, i) => i);
  for (let i = 1; i < at.length; i++) if (at[i] < at[i - 1]) return order.sort((a, b) => at[a] - at[b] || a - b);
  return order;
}

/**
 * Phases of rows in order of time: a run of equal medium, cycle and set-point, split where the time between neighbours is more than
 * five times the median spacing of that medium. The median is over all neighbours within runs of the medium, so that a short run is
 * judged by what is usual in the file; of whole minutes and the like, over those that are not nothing. Without a cycle column, a cycle begins whenever a medium comes that the present cycle has
 * had already; cycles count from 1.
 */
export function splitPhases({ at, medium, cycle, setPointC }: RowKeys, order: Uint32Array): PhaseRows[] {
  const sameRun = (a: number, b: number) =>
    medium[a] === medium[b] && (!cycle || cycle[a] === cycle[b]) && (!setPointC || Object.is(setPointC[a], setPointC[b]));
  const usual = usualSpacings(at, medium, order, sameRun);
  const starts: number[] = [];
  for (let i = 0; i < order.length; i++) {
    const [before, row] = [order[i - 1], order[i]];
    if (i === 0 || !sameRun(before, row) || at[row] - at[before] > GAP * (usual.get(medium[row]) || Infinity)) starts.push(i);
  }
  let counted = 0;
  const had = new Set<number>();
  return starts.map((from, i) => {
    const row = order[from];
    if (had.size === 0 || had.has(medium[row])) {
      had.clear();
      counted++;
    }
    had.add(medium[row]);
    const celsius = setPointC?.[row] ?? NaN;
    return { from, to: starts[i + 1] ?? order.length, medium: medium[row], cycle: cycle ? cycle[row] : counted, setPointC: Number.isNaN(celsius) ? null : celsius };
  });
}

function usualSpacings(at: Float64Array, medium: Int32Array, order: Uint32Array, sameRun: (a: number, b: number) => boolean): Map<number, number> {
  const spacings = new Map<number, number[]>();
  for (let i = 1; i < order.length; i++) {
    const [before, row] = [order[i - 1], order[i]];
    if (!sameRun(before, row)) continue;
    const own = spacings.get(medium[row]);
    if (own) own.push(at[row] - at[before]);
    else spacings.set(medium[row], [at[row] - at[before]]);
  }
  return new Map([...spacings].map(([of, all]) => [of, usualOf(all)]));
}

/** Clocks that show whole minutes give many spacings of nothing: then the median is over the others. */
function usualOf(spacings: readonly number[]): number {
  const usual = median(Float64Array.from(spacings));
  return usual > 0 ? usual : median(Float64Array.from(spacings.filter((ms) => ms > 0)));
}
