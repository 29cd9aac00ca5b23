import { describe, expect, test } from "vitest";
import { lagOneAutocorrelation } from "@/lib/numerics/statistics/lag-one-autocorrelation";
import reference from "@/tests/reference/2-statistics/strd-univariate.json";
import { relativeError } from "@/tests/numerics/relative-error";

const certified = (name: string) => reference.sets.find(({ dataset }) => dataset === name)?.certified.lag1_autocorrelation ?? NaN;

/** NIST/ITL Statistical Reference Datasets, univariate summary statistics. */
describe("StRD, measured sets", () => {
  test.each(["Lew", "Lottery", "Mavro", "Michelso", "NumAcc1"])("%s", (name) => {
    const data = reference.sets.find(({ dataset }) => dataset === name)?.data;
    if (!Array.isArray(data)) throw new Error(`${name} has no values`);
    expect(relativeError(lagOneAutocorrelation(Float64Array.from(data)), certified(name))).toBeLessThan(1e-9);
  });
});

/** One middle value, then 500 pairs 0.1 below and 0.1 above it, under ever larger offsets. */
describe("StRD, made sets", () => {
  test.each([
    { name: "NumAcc2", middle: 1.2, low: 1.1, high: 1.3, tolerance: 1e-9 },
    { name: "NumAcc3", middle: 1000000.2, low: 1000000.1, high: 1000000.3, tolerance: 1e-9 },
    { name: "NumAcc4", middle: 10000000.2, low: 10000000.1, high: 10000000.3, tolerance: 1e-6 },
  ])("$name", ({ name, middle, low, high, tolerance }) => {
    const values = Float64Array.from({ length: 1001 }, (_, i) => (i === 0 ? middle : i % 2 === 1 ? low : high));
    expect(relativeError(lagOneAutocorrelation(values), certified(name))).toBeLessThan(tolerance);
  });
});

test("nothing to correlate", () => {
  expect(lagOneAutocorrelation(Float64Array.of(1))).toBeNaN();
  expect(lagOneAutocorrelation(Float64Array.of(2, 2, 2))).toBeNaN();
});
