import { describe, expect, test } from "vitest";
import { laggedTemperature, phaseTemperature, windowMeans } from "@/lib/numerics/temperature/lagged-temperature";
import { temperatureCoefficient, type TemperatureSeries } from "@/lib/numerics/temperature/temperature-coefficient";
import { gaussian } from "@/tests/numerics/seeded-noise";
import { powerLawNoise } from "@/tests/numerics/stability/power-law-noise";

describe("a body that follows a thermometer", () => {
  const atDays = Float64Array.from({ length: 400 }, (_, i) => i / 100);

  test("after a jump: T − ΔT exp(−t/τ)", () => {
    const temperatureC = atDays.map((_, i) => (i === 0 ? 20 : 21));
    const sensor = laggedTemperature({ atDays, temperatureC }, 0.3);
    // The jump itself takes the first spacing h, straight: 1 − τ/h (1 − exp(−h/τ)) is left to close at its end.
    const behind = (0.3 / 0.01) * (1 - Math.exp(-0.01 / 0.3));
    for (const i of [1, 5, 60, 399]) expect(sensor[i]).toBeCloseTo(21 - behind * Math.exp(-(atDays[i] - 0.01) / 0.3), 10);
  });
  test("on a ramp it runs τ behind", () => {
    const sensor = laggedTemperature({ atDays, temperatureC: atDays.map((day) => 20 + 2 * day) }, 0.1);
    expect(sensor[399]).toBeCloseTo(20 + 2 * (atDays[399] - 0.1), 10);
  });
  test("readings in between on a straight course change nothing", () => {
    const coarse = Float64Array.of(0, 1, 3);
    const fine = Float64Array.of(0, 0.25, 1, 1.5, 2.8, 3);
    const course = (day: number) => (day <= 1 ? 20 + day : 21 - (day - 1) / 2);
    const [a, b] = [coarse, fine].map((days) => laggedTemperature({ atDays: days, temperatureC: days.map(course) }, 0.4));
    expect(b[5]).toBeCloseTo(a[2], 12);
  });
  test("means over windows; a window without a reading takes the line between its neighbours", () => {
    const record = { atDays: Float64Array.of(0, 1, 2, 3), values: Float64Array.of(1, 2, 4, 8) };
    expect([...windowMeans(record, { fromDays: Float64Array.of(0, 1, 2.2), toDays: Float64Array.of(1, 2, 2.8) })]).toEqual([1.5, 3, 6]);
    expect([...windowMeans(record, { fromDays: Float64Array.of(-2, 5), toDays: Float64Array.of(-1, 6) })]).toEqual([1, 8]);
  });
  test("how it moves with the lag is the difference of two lags", () => {
    const history = { atDays, temperatureC: atDays.map((day) => 20 + Math.sin(5 * day)) };
    const windows = { fromDays: Float64Array.of(1, 2), toDays: Float64Array.of(1.1, 2.1) };
    const [near, far] = [0.2, 0.2001].map((lag) => phaseTemperature(history, windows, lag).sensorC);
    phaseTemperature(history, windows, 0.2).perLagDay.forEach((slope, k) => expect(slope).toBeCloseTo((far[k] - near[k]) / 1e-4, 2));
    expect([...phaseTemperature(history, windows).perLagDay]).toEqual([0, 0]);
  });
  test("bad input is an error", () => {
    const history = { atDays: Float64Array.of(0, 1), temperatureC: Float64Array.of(20, 21) };
    expect(() => laggedTemperature(history, 0)).toThrow(RangeError);
    expect(() => laggedTemperature({ ...history, atDays: Float64Array.of(0, 0) }, 1)).toThrow(RangeError);
    expect(() => laggedTemperature({ ...history, temperatureC: Float64Array.of(20, NaN) }, 1)).toThrow(RangeError);
    expect(() => windowMeans({ atDays: history.atDays, values: history.temperatureC }, { fromDays: Float64Array.of(1, 0), toDays: Float64Array.of(1, 1) })).toThrow(RangeError);
    expect(() => windowMeans({ atDays: new Float64Array(0), values: new Float64Array(0) }, { fromDays: Float64Array.of(1), toDays: Float64Array.of(1) })).toThrow(RangeError);
  });
});

const full = process.env.LONGREED_FULL === "1";
const n = 60;
const atDays = Float64Array.from({ length: n }, (_, i) => i / 4);
const temperatureC = atDays.map((day) => 20 + 0.4 * Math.sin(1.7 * day) + 0.1 * day);
const series = (of: (i: number) => number, more: Partial<TemperatureSeries> = {}): TemperatureSeries => ({
  atDays, values: atDays.map((_, i) => of(i)), temperatureC, referenceC: 20, ...more,
});
const termOf = (found: ReturnType<typeof temperatureCoefficient>, model: string, name: string) =>
  found?.candidates.find((one) => one.model === model)?.terms.find((term) => term.name === name) ?? { value: NaN, u: NaN };

describe("95 % of stated uncertainties hold the coefficient, whatever the noise", () => {
  const runs = full ? 500 : 60;
  const chance = 3 * Math.sqrt((0.94 * 0.06) / runs);

  test.each([0, -1, -2])("exponent %i", { timeout: 300_000 }, (alpha) => {
    const make = powerLawNoise({ alpha, length: n, seed: 50 - alpha });
    let held = 0;
    let ratio = 0;
    for (let run = 0; run < runs; run++) {
      const noise = make();
      const b = termOf(temperatureCoefficient(series((i) => 0.8 * atDays[i] - 6 * (temperatureC[i] - 20) + noise[i])), "linear", "linear");
      if (Math.abs(b.value + 6) < 1.96 * b.u) held++;
      ratio += ((b.value + 6) / b.u) ** 2 / runs;
    }
    expect(held / runs).toBeGreaterThan(0.92 - chance);
    expect(held / runs).toBeLessThanOrEqual(1);
    expect(ratio).toBeGreaterThan(0.5); // not bought with far too wide a statement
  });
});

describe("choice by AICc", () => {
  const noise = powerLawNoise({ alpha: 0, length: n, seed: 4 })();

  const theta = temperatureC.map((value) => value - 20);
  /** Share of forty series for which each model is preferred; AICc takes a needless term in about one of six. */
  const shares = (of: (i: number) => number) => {
    const make = powerLawNoise({ alpha: 0, length: n, seed: 14 });
    const found = Array.from({ length: 40 }, () => {
      const draw = make();
      return temperatureCoefficient(series((i) => of(i) + draw[i]))?.preferred.model;
    });
    return (model: string) => found.filter((one) => one === model).length / found.length;
  };

  test("nothing where temperature does nothing, a straight coefficient, a curved one", () => {
    expect(shares((i) => 3 + 0.2 * atDays[i])("none")).toBeGreaterThan(0.6);
    expect(shares((i) => -20 * theta[i])("linear")).toBeGreaterThan(0.65);
    expect(shares((i) => -20 * theta[i] + 6 * theta[i] ** 2)("quadratic")).toBe(1);
  });
  test("the curve is the one that was put in", () => {
    const b2 = termOf(temperatureCoefficient(series((i) => -20 * theta[i] + 6 * theta[i] ** 2 + noise[i])), "quadratic", "quadratic");
    expect(Math.abs(b2.value - 6)).toBeLessThan(3 * b2.u);
  });
  test("drift and temperature that rise together are not taken for each other", () => {
    const found = temperatureCoefficient(series((i) => 5 * atDays[i] - 20 * (temperatureC[i] - 20) + noise[i]));
    expect(Math.abs((found?.preferred.driftPerDay ?? NaN) - 5)).toBeLessThan(3 * (found?.preferred.driftU ?? NaN));
  });
  test("a known step is no drift and no temperature", () => {
    const of = (i: number) => (i >= 33 ? 400 : 0) - 20 * (temperatureC[i] - 20) + noise[i];
    const b = termOf(temperatureCoefficient(series(of, { steps: [33] })), "linear", "linear");
    expect(Math.abs(b.value + 20)).toBeLessThan(3 * b.u);
    expect(b.u).toBeLessThan(termOf(temperatureCoefficient(series(of)), "linear", "linear").u / 3);
  });
  test("two temperatures only: no curve can be told", () => {
    const two = temperatureC.map((_, i) => (i % 2 === 0 ? 15 : 25));
    const found = temperatureCoefficient(series((i) => -2 * two[i] + noise[i], { temperatureC: two }));
    expect(found?.candidates.map(({ model }) => model)).toEqual(["none", "linear"]);
  });
});

describe("scatter of the thermometer", () => {
  const runs = 40;
  const u = 0.05;
  const next = gaussian(6);
  const make = powerLawNoise({ alpha: 0, length: n, seed: 2 });
  const found = Array.from({ length: runs }, () => {
    const noise = make();
    const scattered = temperatureC.map((value) => value + u * next());
    return temperatureCoefficient(series((i) => -20 * (temperatureC[i] - 20) + noise[i], { temperatureC: scattered, temperatureU: new Float64Array(n).fill(u) }));
  });
  const mean = (of: (one: (typeof found)[number]) => number) => found.reduce((sum, one) => sum + of(one), 0) / runs;

  test("the share by which the coefficient is too small is named", () => {
    const share = 1 + mean((one) => termOf(one, "linear", "linear").value) / 20;
    expect(share).toBeGreaterThan(0.02);
    expect(Math.abs(mean((one) => one?.attenuation ?? NaN) / share - 1)).toBeLessThan(0.5);
  });
  test("and enters the uncertainty, which then holds the truth", () => {
    const held = mean((one) => {
      const b = termOf(one, "linear", "linear");
      return Math.abs(b.value + 20) < 1.96 * b.u ? 1 : 0;
    });
    expect(held).toBeGreaterThan(0.9);
  });
  test("not stated where the scatter is not known", () => {
    const noise = make();
    expect(temperatureCoefficient(series((i) => noise[i]))?.attenuation).toBeNaN();
  });
});

test("more than 300 values: levels are free between stretches, the coefficient is common", () => {
  const many = 700;
  const days = Float64Array.from({ length: many }, (_, i) => i / 12);
  const theta = days.map((day) => 0.1 * Math.cos(2 * Math.PI * day));
  const noise = powerLawNoise({ alpha: 0, length: many, seed: 9 })();
  const found = temperatureCoefficient({ atDays: days, values: days.map((day, i) => 0.1 * day - 30 * theta[i] + noise[i]), temperatureC: theta.map((value) => 20 + value), referenceC: 20 });
  const b = termOf(found, "linear", "linear");
  expect(found?.n).toBe(many);
  expect(Math.abs(b.value + 30)).toBeLessThan(3 * b.u);
  expect(b.u).toBeLessThan(1.5 * Math.sqrt(2 / many) / 0.1);

  // 233 is where the second stretch would begin.
  const jumped = temperatureCoefficient({ atDays: days, values: days.map((day, i) => (i < 233 ? 0 : 80) + 0.1 * day - 30 * theta[i] + noise[i]), temperatureC: theta.map((value) => 20 + value), referenceC: 20, steps: [233] });
  expect(Math.abs(termOf(jumped, "linear", "linear").value - b.value)).toBeLessThan(b.u);
  expect(termOf(jumped, "linear", "linear").u).toBeLessThan(1.1 * b.u);
  expect(() => temperatureCoefficient({ atDays: Float64Array.from({ length: 3001 }, (_, i) => i), values: new Float64Array(3001), temperatureC: new Float64Array(3001), referenceC: 20 })).toThrow(/3000/);
});

test("an exact series, too few values, no change of temperature, bad input", () => {
  const exact = temperatureCoefficient(series((i) => 5 + 2 * atDays[i] - 3 * (temperatureC[i] - 20)));
  expect(termOf(exact, "linear", "linear").value).toBeCloseTo(-3, 9);
  expect(temperatureCoefficient({ atDays: atDays.subarray(0, 11), values: atDays.subarray(0, 11), temperatureC: temperatureC.subarray(0, 11), referenceC: 20 })).toBeUndefined();
  expect(temperatureCoefficient(series((i) => i, { temperatureC: new Float64Array(n).fill(20) }))).toBeUndefined();
  expect(temperatureCoefficient(series((i) => i, { temperatureC: atDays.map((day) => 20 + day) }))).toBeUndefined();
  expect(() => temperatureCoefficient(series((i) => i, { temperatureC: temperatureC.subarray(1) }))).toThrow(RangeError);
  expect(() => temperatureCoefficient(series((i) => (i === 4 ? NaN : i)))).toThrow(RangeError);
  expect(() => temperatureCoefficient(series((i) => i, { steps: [0] }))).toThrow(RangeError);
  expect(() => temperatureCoefficient(series((i) => i, { atDays: new Float64Array(n) }))).toThrow(RangeError);
});
