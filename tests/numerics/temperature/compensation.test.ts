import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { airDensityCorrection } from "@/lib/numerics/temperature/air-density-correction";
import { chained, commonU, weightedSumU } from "@/lib/numerics/temperature/compensated";
import { compensateTemperature } from "@/lib/numerics/temperature/compensate-temperature";
import { gaussian } from "@/tests/numerics/seeded-noise";

const values = Float64Array.of(100, 101, 99);
const sensorC = Float64Array.of(20, 21, 18);
const fit = {
  referenceC: 20,
  terms: [{ name: "linear", value: -3, u: 0.1 }, { name: "quadratic", value: 0.5, u: 0.02 }] as const,
  covariance: Float64Array.of(0.01, -0.001, -0.001, 0.0004),
};

describe("temperature", () => {
  const found = compensateTemperature({ values, fit, sensorC, sensorU: new Float64Array(3).fill(0.01), thermometerU: 0.05 });

  test("values at the reference temperature: y − b₁θ − b₂θ²", () => {
    expect([...found.values]).toEqual([100, 101 + 3 - 0.5, 99 - 6 - 2]);
  });
  test("scatter of the thermometer is independent, its calibration common", () => {
    expect(found.independentU[0]).toBeCloseTo(0.03, 12);
    expect(found.independentU[2]).toBeCloseTo(0.05, 12); // slope −3 − 2
    expect(found.sources).toEqual(["linear", "quadratic", "thermometer"]);
    expect(commonU(found)[0]).toBeCloseTo(0.15, 12); // at the reference only the thermometer is left
  });
  test("the coefficients' uncertainty grows with distance from the reference, their covariance counted", () => {
    const theta = -2;
    const expected = theta ** 2 * 0.01 + theta ** 4 * 0.0004 + 2 * theta ** 3 * -0.001 + 25 * 0.05 ** 2;
    expect(commonU(found)[2] ** 2).toBeCloseTo(expected, 12);
  });
  test("a mean shrinks the independent part only", () => {
    const many = 400;
    const same = compensateTemperature({ values: new Float64Array(many), fit, sensorC: new Float64Array(many).fill(21), sensorU: new Float64Array(many).fill(0.01), thermometerU: 0.05 });
    const mean = weightedSumU(same, new Float64Array(many).fill(1 / many), new Float64Array(many).fill(0.2));
    expect(mean.common).toBeCloseTo(commonU(same)[0], 12);
    expect(mean.independent).toBeCloseTo(Math.hypot(0.02, 0.2) / 20, 12);
    expect(mean.u).toBeCloseTo(Math.hypot(mean.common, mean.independent), 12);
  });
  test("in a difference at one temperature the common part is gone", () => {
    const pair = compensateTemperature({ values: Float64Array.of(5, 6), fit, sensorC: Float64Array.of(21, 21), thermometerU: 0.05 });
    expect(weightedSumU(pair, Float64Array.of(1, -1)).u).toBeLessThan(1e-12);
  });
  test("no coefficient, no change", () => {
    const none = compensateTemperature({ values, fit: { referenceC: 20, terms: [], covariance: new Float64Array(0) }, sensorC });
    expect([...none.values]).toEqual([...values]);
    expect(weightedSumU(none, Float64Array.of(1, 1, 1)).u).toBe(0);
  });
  test("unequal lengths and a lag without its derivative are errors", () => {
    expect(() => compensateTemperature({ values, fit, sensorC: sensorC.subarray(1) })).toThrow(RangeError);
    expect(() => compensateTemperature({ values, fit: { referenceC: 20, terms: [{ name: "lag", value: 1, u: 1 }], covariance: Float64Array.of(1) }, sensorC })).toThrow(/lag/);
    expect(() => weightedSumU(found, Float64Array.of(1))).toThrow(RangeError);
  });
});

/** JCGM 100:2008 eq. (13) against drawing the common errors and the scatter again and again. */
test("the stated uncertainty of a weighted sum is the scatter of what is drawn", () => {
  const next = gaussian(17);
  const weights = Float64Array.of(0.5, -1.2, 0.4);
  const { sensitivities, covariance } = compensateTemperature({ values, fit, sensorC, thermometerU: 0.05 });
  const stated = weightedSumU(compensateTemperature({ values, fit, sensorC, sensorU: new Float64Array(3).fill(0.02), thermometerU: 0.05 }), weights).u;
  const [a, b, c] = [Math.sqrt(covariance[0]), covariance[1] / Math.sqrt(covariance[0]), Math.sqrt(covariance[4] - covariance[1] ** 2 / covariance[0])];
  let squares = 0;
  const draws = 40_000;
  for (let draw = 0; draw < draws; draw++) {
    const [one, two] = [next(), next()];
    const errors = [a * one, b * one + c * two, 0.05 * next()];
    let sum = 0;
    weights.forEach((weight, i) => {
      const slope = -3 + (sensorC[i] - 20);
      sum += weight * (errors.reduce((total, error, j) => total + error * sensitivities[j][i], 0) + slope * 0.02 * next());
    });
    squares += sum ** 2;
  }
  expect(Math.abs(Math.sqrt(squares / draws) / stated - 1)).toBeLessThan(0.02);
});

test("corrections one after the other keep their parts", () => {
  const first = compensateTemperature({ values, fit, sensorC, thermometerU: 0.05 });
  const density = { atDays: Float64Array.of(0, 1, 2), densityKgM3: Float64Array.of(1.2, 1.18, 1.23), slope: { value: -4, u: 0.2 } };
  const second = airDensityCorrection({ ...density, values: first.values });
  if (second.basis === "none") throw new Error(second.because);
  const both = chained(first, second.corrected);
  expect(both.values).toEqual(second.corrected.values);
  fc.assert(
    fc.property(fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: 3, maxLength: 3 }), (list) => {
      const weights = Float64Array.from(list);
      const apart = Math.hypot(weightedSumU(first, weights).u, weightedSumU(second.corrected, weights).u);
      expect(weightedSumU(both, weights).u).toBeCloseTo(apart, 9);
    }),
  );
});

describe("air density", () => {
  const n = 24;
  const next = gaussian(2);
  const atDays = Float64Array.from({ length: n }, (_, i) => i);
  const densityKgM3 = atDays.map((day) => 1.19 + 0.02 * Math.sin(day));
  const references = atDays.map((day, i) => 2700 + 0.001 * day - 0.9 * (densityKgM3[i] - 1.2) + 1e-4 * next());

  test("by calibration: y − k (ρ − 1.2), k's uncertainty common", () => {
    const found = airDensityCorrection({ atDays, values: references, densityKgM3, slope: { value: -0.9, u: 0.05 }, densityU: new Float64Array(n).fill(0.001), commonDensityU: 0.002 });
    if (found.basis !== "calibration") throw new Error("no calibration");
    found.corrected.values.forEach((value, i) => expect(value).toBeCloseTo(references[i] + 0.9 * (densityKgM3[i] - 1.2), 9));
    expect(found.corrected.independentU[3]).toBeCloseTo(0.0009, 12);
    expect(commonU(found.corrected)[3]).toBeCloseTo(Math.hypot(0.05 * (densityKgM3[3] - 1.2), 0.9 * 0.002), 12);
  });
  test("by regression where it is not given", () => {
    const found = airDensityCorrection({ atDays, values: references, densityKgM3 });
    expect(found.basis).toBe("regression");
    if (found.basis === "none") return;
    expect(Math.abs(found.slope.value + 0.9)).toBeLessThan(4 * found.slope.u);
  });
  test("not at all below twenty references, below one percent, or where density goes with time: said so", () => {
    const cut = { atDays: atDays.subarray(0, 19), values: references.subarray(0, 19), densityKgM3: densityKgM3.subarray(0, 19) };
    expect(airDensityCorrection(cut)).toMatchObject({ basis: "none", because: "too few references" });
    expect(airDensityCorrection({ atDays, values: references, densityKgM3: atDays.map((day) => 1.2 + 0.005 * Math.sin(day)) })).toMatchObject({ basis: "none", because: "density hardly changes" });
    expect(airDensityCorrection({ atDays, values: references, densityKgM3: atDays.map((day) => 1.2 + 0.001 * day) })).toMatchObject({ basis: "none", because: "density goes with drift or temperature" });
    expect(airDensityCorrection({ atDays, values: references, densityKgM3, temperatureC: densityKgM3.map((density) => 20 - 10 * density) })).toMatchObject({ because: "density goes with drift or temperature" });
  });
  test("a density that is missing is an error", () => {
    expect(() => airDensityCorrection({ atDays, values: references, densityKgM3: densityKgM3.subarray(1) })).toThrow(RangeError);
    expect(() => airDensityCorrection({ atDays, values: references, densityKgM3: densityKgM3.with(2, NaN) })).toThrow(RangeError);
  });
});
