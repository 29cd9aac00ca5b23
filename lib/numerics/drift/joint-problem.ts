import { columnSearch } from "@/lib/numerics/drift/column-search";
import { glsFit, type GlsFit } from "@/lib/numerics/drift/gls-fit";
import { cutAt, differencesWithin, stretchBounds, whiteners, type Whitener } from "@/lib/numerics/drift/whiteners";
import { regression } from "@/lib/numerics/statistics/regression";

/** Values beyond this would cost more seconds than they are worth. */
const mostJointValues = 3000;

/** Left of a column's square below which others are taken to explain it. */
const nothingLeft = 1e-10;

/** A series with its drift and known steps, ready to be fitted together with whatever else may have moved it. */
export type JointProblem = {
  noise: readonly Whitener[];
  /** How many coefficients stand before those of the extra columns: drift, then steps. */
  shared: number;
  sharedColumns: readonly Float64Array[];
  spanDays: number;
  shortestDays: number;
  /** Differences of a series within the stretches that share a level. */
  differences: (series: Float64Array) => Float64Array;
  /** Whether each column moves in a way that drift, steps and the columns before it do not explain. */
  varies: (extra: readonly Float64Array[]) => boolean;
  fit: (extra: readonly Float64Array[], more?: { extraUnknowns?: number }) => GlsFit;
  /** −2 ln of the likelihood with the extra columns, for a search over their shape; see `columnSearch`. */
  misfit: (extra: readonly Float64Array[]) => number;
};

/**
 * @param atDays Times in days, rising.
 * @param values One per time, all finite, at most 3 000.
 * @param steps Places of the first value after a known step of the level.
 * @throws RangeError if lengths differ, times do not rise, a value is not finite, there are too many, or a step is no
 *   place between two values.
 */
export function jointProblem({
  atDays,
  values,
  steps = [],
  ...others
}: {
  atDays: Float64Array;
  values: Float64Array;
  steps?: readonly number[];
  temperatureC?: Float64Array;
  temperatureU?: Float64Array;
}): JointProblem {
  const n = values.length;
  const parallel = [atDays, others.temperatureC, others.temperatureU].filter((one) => one !== undefined);
  if (parallel.some(({ length }) => length !== n)) throw new RangeError("times, values and what goes with them must be equally many");
  if (![values, ...parallel].every((one) => one.every(Number.isFinite))) throw new RangeError("a value is not finite");
  if (steps.some((place) => !Number.isInteger(place) || place < 1 || place >= n)) throw new RangeError("a step lies between two values");
  if (n > mostJointValues) throw new RangeError(`at most ${mostJointValues} values, got ${n}`);

  // A step where a stretch begins would be no more than that stretch's own level.
  const isStep = new Set(steps);
  const bounds = stretchBounds(n).map((bound) => {
    let place = bound;
    while (isStep.has(place)) place++;
    return place;
  });
  const differences = (series: Float64Array) => differencesWithin(cutAt(bounds, series));
  const levels = steps.map((place) => differences(new Float64Array(n).fill(1, place)));
  const sharedColumns = [differences(atDays), ...levels];
  const noise = whiteners(cutAt(bounds, atDays));
  const target = differences(values);
  const search = columnSearch({ noise, values: target, columns: sharedColumns });
  return {
    noise,
    shared: sharedColumns.length,
    sharedColumns,
    spanDays: atDays[n - 1] - atDays[0],
    shortestDays: differencesWithin([atDays]).reduce((least, spacing) => Math.min(least, spacing), Infinity),
    differences,
    varies: (extra) => {
      const columns = [...sharedColumns, ...extra.map(differences)];
      return extra.every((_, i) => !isExplained(columns[sharedColumns.length + i], columns.slice(0, sharedColumns.length + i)));
    },
    misfit: (extra) => search(extra.map(differences)),
    fit: (extra, more) => glsFit({ noise, values: target, columns: [...sharedColumns, ...extra.map(differences)], ...more }),
  };
}

function isExplained(column: Float64Array, others: readonly Float64Array[]): boolean {
  const total = column.reduce((sum, value) => sum + value ** 2, 0);
  if (total === 0 || column.length <= others.length) return true;
  return regression({ columns: others, y: column }).residualSumOfSquares <= nothingLeft * total;
}
