import { describe, expect, test } from "vitest";
import { nonlinearRegression } from "@/lib/numerics/statistics/nonlinear-regression";
import boxbod from "@/tests/reference/2-statistics/strd-nonlinear-boxbod.json";
import eckerle4 from "@/tests/reference/2-statistics/strd-nonlinear-eckerle4.json";
import gauss2 from "@/tests/reference/2-statistics/strd-nonlinear-gauss2.json";
import lanczos3 from "@/tests/reference/2-statistics/strd-nonlinear-lanczos3.json";
import mgh17 from "@/tests/reference/2-statistics/strd-nonlinear-mgh17.json";
import misra1a from "@/tests/reference/2-statistics/strd-nonlinear-misra1a.json";
import thurber from "@/tests/reference/2-statistics/strd-nonlinear-thurber.json";
import { relativeError } from "@/tests/numerics/relative-error";

type Formula = (b: Float64Array, x: number) => number;
const saturation: Formula = ([b1, b2], x) => b1 * (1 - Math.exp(-b2 * x));

/** NIST/ITL Statistical Reference Datasets, nonlinear regression. */
const sets: { name: string; set: typeof misra1a | typeof thurber; formula: Formula; farMayFail?: boolean }[] = [
  { name: "Misra1a", set: misra1a, formula: saturation },
  {
    name: "Gauss2",
    set: gauss2,
    formula: ([b1, b2, b3, b4, b5, b6, b7, b8], x) => b1 * Math.exp(-b2 * x) + b3 * Math.exp(-((x - b4) ** 2) / b5 ** 2) + b6 * Math.exp(-((x - b7) ** 2) / b8 ** 2),
  },
  { name: "Lanczos3", set: lanczos3, formula: ([b1, b2, b3, b4, b5, b6], x) => b1 * Math.exp(-b2 * x) + b3 * Math.exp(-b4 * x) + b5 * Math.exp(-b6 * x) },
  { name: "MGH17", set: mgh17, formula: ([b1, b2, b3, b4, b5], x) => b1 + b2 * Math.exp(-x * b4) + b3 * Math.exp(-x * b5), farMayFail: true },
  { name: "Eckerle4", set: eckerle4, formula: ([b1, b2, b3], x) => (b1 / b2) * Math.exp(-0.5 * ((x - b3) / b2) ** 2), farMayFail: true },
  { name: "BoxBOD", set: boxbod, formula: saturation, farMayFail: true },
  { name: "Thurber", set: thurber, formula: ([b1, b2, b3, b4, b5, b6, b7], x) => (b1 + b2 * x + b3 * x ** 2 + b4 * x ** 3) / (1 + b5 * x + b6 * x ** 2 + b7 * x ** 3) },
];

describe.each(sets)("StRD $name", ({ set, formula, farMayFail }) => {
  const rows: number[][] = set.data.rows;
  const { certified } = set;
  const fitFrom = (start: number[]) =>
    nonlinearRegression({
      model: (b, out) => rows.forEach(([, x], i) => (out[i] = formula(b, x))),
      y: Float64Array.from(rows, ([y]) => y),
      start: Float64Array.from(start),
    });
  const expectCertified = (found: ReturnType<typeof fitFrom>) => {
    certified.parameters.forEach((value, j) => expect(relativeError(found.parameters[j], value)).toBeLessThan(1e-6));
    certified.standard_deviations.forEach((value, j) => expect(relativeError(found.standardErrors[j], value)).toBeLessThan(1e-4));
    expect(relativeError(found.residualSumOfSquares, certified.residual_sum_of_squares)).toBeLessThan(1e-6);
    expect(found.dof).toBe(certified.degrees_of_freedom);
  };

  test("from the near start", () => {
    const found = fitFrom(set.starting_values.start_2);
    expect(found.settled).toBe(true);
    expectCertified(found);
  });
  test(farMayFail ? "from the far start, or it says that it did not settle" : "from the far start", () => {
    const found = fitFrom(set.starting_values.start_1);
    if (farMayFail && !found.settled) return expect(found.standardErrors[0]).toBeNaN();
    expectCertified(found);
  });
});

test("a model that fits exactly", () => {
  const x = Float64Array.from({ length: 20 }, (_, i) => i);
  const found = nonlinearRegression({ model: (b, out) => x.forEach((at, i) => (out[i] = b[0] * Math.exp(-at / b[1]))), y: x.map((at) => 3 * Math.exp(-at / 7)), start: Float64Array.of(1, 2) });
  expect(found.settled).toBe(true);
  expect(found.parameters[0]).toBeCloseTo(3, 9);
  expect(found.parameters[1]).toBeCloseTo(7, 9);
});

test("a parameter that does nothing is not called settled", () => {
  const y = Float64Array.of(1, 2, 3, 5);
  expect(nonlinearRegression({ model: (b, out) => out.fill(b[0]), y, start: Float64Array.of(1, 1) }).settled).toBe(false);
});

test("too few values and impossible first guesses are errors", () => {
  const one = { model: (b: Float64Array, out: Float64Array) => out.fill(1 / b[0]), start: Float64Array.of(1) };
  expect(() => nonlinearRegression({ ...one, y: Float64Array.of(1) })).toThrow(RangeError);
  expect(() => nonlinearRegression({ ...one, y: Float64Array.of(1, NaN) })).toThrow(RangeError);
  expect(() => nonlinearRegression({ ...one, y: Float64Array.of(1, 2), start: Float64Array.of(0) })).toThrow(RangeError);
});
