import { describe, expect, test } from "vitest";
import { ewma, returnEwma } from "@/lib/numerics/statistics/ewma";
import { movingRangeSigma } from "@/lib/numerics/statistics/moving-range-sigma";
import { referenceTable } from "@/tests/numerics/reference-table";
import { gaussian } from "@/tests/numerics/seeded-noise";
import { relativeError } from "@/tests/numerics/relative-error";
import reference from "@/tests/reference/5-metrology/control-charts.json";

/** NIST/SEMATECH e-Handbook 6.3.2.4, worked example: λ 0.3, σ 2.0539, start 50. */
describe("EWMA worked example", () => {
  const { example } = reference.ewma;
  const found = ewma({ values: Float64Array.from(example.data), mean: 50, sigma: example.sigma, lambda: 0.3, width: 3 });

  test("averages and limits", () => {
    example.computed.slice(1).forEach((value, t) => expect(Math.abs(found.averages[t] - value)).toBeLessThan(1e-4));
    expect(relativeError(found.upper, example.computed_limits.UCL)).toBeLessThan(1e-9);
    expect(relativeError(found.lower, example.computed_limits.LCL)).toBeLessThan(1e-9);
  });
  test("in control", () => {
    expect(found.signals).toBe(false);
    expect(found.firstSignal).toBeUndefined();
  });
});

/** Lucas and Saccucci, Technometrics 32 (1990), Table 3: λ 0.2, L 2.962. */
describe("run length of the return chart", () => {
  const row = reference.ewma.ARL.find(({ lam }) => lam === returnEwma.lambda);
  const runs = 4000;

  test.each([0.5, 1, 2, 3])("shift of %f σ", (shift) => {
    const expected = row?.computed[reference.ewma.shifts.indexOf(shift)] ?? NaN;
    const next = gaussian(20_261);
    let total = 0;
    for (let run = 0; run < runs; run++) {
      const values = Float64Array.from({ length: 1000 }, () => shift + next());
      total += (ewma({ values, mean: 0, sigma: 1 }).firstSignal ?? values.length) + 1;
    }
    // A run length has a standard deviation below its mean: four standard errors.
    expect(relativeError(total / runs, expected)).toBeLessThan(4 / Math.sqrt(runs));
  });
});

test("a lasting shift signals and keeps signalling, a return ends it", () => {
  const shifted = Float64Array.from({ length: 12 }, () => 2);
  expect(ewma({ values: shifted, mean: 0, sigma: 1 }).signals).toBe(true);
  const returned = Float64Array.from([...shifted, ...new Array<number>(10).fill(0)]);
  expect(ewma({ values: returned, mean: 0, sigma: 1 })).toMatchObject({ signals: false, firstSignal: 3 });
});

test("bad input to the chart is an error", () => {
  expect(() => ewma({ values: Float64Array.of(1), mean: 0, sigma: 0 })).toThrow(RangeError);
  expect(() => ewma({ values: Float64Array.of(NaN), mean: 0, sigma: 1 })).toThrow(RangeError);
  expect(() => ewma({ values: Float64Array.of(1), mean: 0, sigma: 1, lambda: 1.1 })).toThrow(RangeError);
  expect(ewma({ values: new Float64Array(0), mean: 0, sigma: 1 }).signals).toBe(false);
});

/** NIST/SEMATECH e-Handbook 6.3.2.2: mean moving range 1.8778, limits 45.8159 and 55.8041 (1.128). */
test("moving range of the individuals example", () => {
  const { data, mean, computed } = reference.individuals.example;
  const sigma = movingRangeSigma(Float64Array.from(data));
  expect(relativeError(sigma * 1.128, computed.mr_bar)).toBeLessThan(1e-12);
  expect(relativeError(mean + 3 * sigma, computed.UCL)).toBeLessThan(1e-12);
  expect(movingRangeSigma(Float64Array.of(1))).toBeNaN();
});

/** ISO 7870-2, d₂ of ranges of two as printed; the exact value is 2/√π. */
test("moving ranges are scaled by the tabulated d₂", () => {
  const [{ d2_printed, d2 }] = referenceTable("5-metrology/control-chart-constants.csv");
  expect(movingRangeSigma(Float64Array.of(0, 1))).toBeCloseTo(1 / d2_printed, 12);
  expect(Math.abs(1 / movingRangeSigma(Float64Array.of(0, 1)) - d2)).toBeLessThan(5e-4);
});
