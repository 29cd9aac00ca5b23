import { describe, expect, test } from "vitest";
import { leastSquaresLine } from "@/lib/numerics/drift/least-squares-line";
import { regression } from "@/lib/numerics/statistics/regression";
import longley from "@/tests/reference/2-statistics/strd-linear-longley.json";
import norris from "@/tests/reference/2-statistics/strd-linear-norris.json";
import pontius from "@/tests/reference/2-statistics/strd-linear-pontius.json";
import { relativeError } from "@/tests/numerics/relative-error";

const column = (rows: number[][], j: number) => Float64Array.from(rows, (row) => row[j]);
const ones = (rows: number[][]) => new Float64Array(rows.length).fill(1);

/** NIST/ITL Statistical Reference Datasets, linear regression. */
describe.each([
  {
    name: "Norris",
    tolerance: 1e-9,
    set: norris,
    columns: [ones(norris.data.rows), column(norris.data.rows, 1)],
  },
  {
    name: "Pontius",
    tolerance: 1e-9,
    set: pontius,
    columns: [
      ones(pontius.data.rows),
      column(pontius.data.rows, 1),
      column(pontius.data.rows, 1).map((x) => x ** 2),
    ],
  },
  {
    name: "Longley",
    tolerance: 1e-7,
    set: longley,
    columns: [ones(longley.data.rows), ...[1, 2, 3, 4, 5, 6].map((j) => column(longley.data.rows, j))],
  },
])("StRD $name", ({ set, columns, tolerance }) => {
  const found = regression({ columns, y: column(set.data.rows, 0) });

  test("coefficients", () => {
    set.certified.estimate.forEach((value, j) =>
      expect(relativeError(found.coefficients[j], value)).toBeLessThan(tolerance),
    );
  });
  test("standard errors and residual sum of squares", () => {
    set.certified.sd.forEach((value, j) => expect(relativeError(found.standardErrors[j], value)).toBeLessThan(tolerance));
    expect(relativeError(found.residualSumOfSquares, set.certified.residual_ss)).toBeLessThan(tolerance);
  });
});

test("StRD Norris by the straight-line function", () => {
  const { rows } = norris.data;
  const line = leastSquaresLine({ x: column(rows, 1), y: column(rows, 0) });
  const { estimate, sd, residual_sd } = norris.certified;
  expect(relativeError(line?.intercept, estimate[0])).toBeLessThan(1e-9);
  expect(relativeError(line?.slope, estimate[1])).toBeLessThan(1e-9);
  expect(relativeError(line?.interceptError, sd[0])).toBeLessThan(1e-9);
  expect(relativeError(line?.slopeError, sd[1])).toBeLessThan(1e-9);
  expect(relativeError(line?.residualSd, residual_sd)).toBeLessThan(1e-9);
});

test("columns that depend on each other are an error, not a number", () => {
  const x = Float64Array.of(1, 2, 3, 4);
  expect(() => regression({ columns: [x, x.map((value) => 2 * value)], y: x })).toThrow(RangeError);
});

test("fewer values than coefficients are an error", () => {
  const one = Float64Array.of(1);
  expect(() => regression({ columns: [one, one], y: one })).toThrow(RangeError);
});
