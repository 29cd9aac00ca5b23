import { describe, expect, test } from "vitest";
import { airDensity } from "@/lib/fluids/air-density";
import { airDensityCorrection } from "@/lib/numerics/temperature/air-density-correction";
import { compensateTemperature } from "@/lib/numerics/temperature/compensate-temperature";
import { temperatureCoefficient } from "@/lib/numerics/temperature/temperature-coefficient";
import { airPhase, column, scenarioWith, trueDensitySlope, trueTemperatureCoefficient } from "@/tests/numerics/temperature/simulated-air";

const full = process.env.LONGREED_FULL === "1";
const seeds = Array.from({ length: full ? 200 : 24 }, (_, i) => i + 1);
const least = (rate: number) => rate - 3 * Math.sqrt((rate * (1 - rate)) / seeds.length);
const steadyWeather = { pressureSwingPa: 0, humiditySwingPercent: 0, dryingCoolsC: 0 };
const phases = (scenario: ReturnType<typeof scenarioWith>, seed: number, count: number) =>
  Array.from({ length: count }, (_, k) => airPhase(scenario, { sequence: 1 + k, seed }));

describe("the simulator's temperature coefficient", () => {
  const noise = { f0WhitePpm: 0.3, f0FlickerPpm: 0.03, f0WalkPpmPerRootDay: 0 };

  test("comes back within the stated uncertainty at its rate, whatever drift goes on", { timeout: 300_000 }, () => {
    const scenario = scenarioWith({ noise, surroundings: { ...steadyWeather, leak: 0.06, sensorLagS: 0, wanderC: 0.004 }, changes: { drift: [{ f0PpmPerDay: -0.7 }] } });
    const truth = trueTemperatureCoefficient(scenario);
    let held = 0;
    let drifts = 0;
    for (const seed of seeds) {
      const taken = phases(scenario, seed, 80).map(({ phase }) => phase);
      const found = temperatureCoefficient({
        atDays: column(taken, "atDays"), values: column(taken, "f0Hz"), temperatureC: column(taken, "thermometerC"),
        temperatureU: new Float64Array(80).fill(0.0005 / Math.sqrt(20)), referenceC: 20,
      });
      const linear = found?.candidates.find(({ model }) => model === "linear");
      const [b] = linear?.terms ?? [];
      if (Math.abs(b.value - truth) < 1.96 * b.u) held++;
      const f0 = taken[0].f0Hz;
      if (linear && Math.abs(linear.driftPerDay - -0.7e-6 * f0) < 1.96 * linear.driftU) drifts++;
      expect(found?.preferred.model).not.toBe("none");
    }
    expect(held / seeds.length).toBeGreaterThan(least(0.92));
    expect(drifts / seeds.length).toBeGreaterThan(least(0.92));
  });

  test("compensation takes the daily cycle out of the values", () => {
    const scenario = scenarioWith({ noise, surroundings: { ...steadyWeather, leak: 0.06, sensorLagS: 0 } });
    const taken = phases(scenario, 5, 80).map(({ phase }) => phase);
    const [values, sensorC] = [column(taken, "f0Hz"), column(taken, "thermometerC")];
    const found = temperatureCoefficient({ atDays: column(taken, "atDays"), values, temperatureC: sensorC, referenceC: 20 });
    if (!found) throw new Error("no coefficient");
    const compensated = compensateTemperature({ values, fit: found.preferred, sensorC });
    expect(scatter(compensated.values)).toBeLessThan(scatter(values) / 3);
  });

  test("a lagging sensor's delay comes back as the time constant, and the coefficient with it", { timeout: 300_000 }, () => {
    const delayS = 5400;
    const scenario = scenarioWith({ noise, surroundings: { ...steadyWeather, leak: 0.06, sensorLagS: delayS }, pace: { hoursPerStep: 1 } });
    const truth = trueTemperatureCoefficient(scenario);
    const taken = phases(scenario, 3, 120);
    const found = temperatureCoefficient({
      atDays: column(taken.map(({ phase }) => phase), "atDays"),
      values: column(taken.map(({ phase }) => phase), "f0Hz"),
      temperatureC: column(taken.map(({ phase }) => phase), "thermometerC"),
      referenceC: 20,
      lag: {
        history: { atDays: Float64Array.from(taken.flatMap(({ readings }) => readings.map(({ atDays }) => atDays))), temperatureC: Float64Array.from(taken.flatMap(({ readings }) => readings.map(({ temperatureC }) => temperatureC))) },
        windows: { fromDays: column(taken.map(({ phase }) => phase), "fromDays"), toDays: column(taken.map(({ phase }) => phase), "toDays") },
      },
    });
    expect(found?.preferred.model).toMatch(/lag/);
    const terms = Object.fromEntries((found?.preferred.terms ?? []).map((term) => [term.name, term]));
    // A first-order lag delays a daily wave by atan(ωτ)/ω and shrinks it by cos(ωτ): what is a pure delay here is fitted by it.
    const omega = (2 * Math.PI) / 86_400;
    const tau = Math.tan(omega * delayS) / omega;
    expect(Math.abs(terms.lag.value * 86_400 - tau)).toBeLessThan(3 * terms.lag.u * 86_400 + 0.05 * tau);
    expect(Math.abs(terms.linear.value - truth / Math.cos(omega * delayS))).toBeLessThan(3 * terms.linear.u + 0.02 * Math.abs(truth));
  });
});

function scatter(values: Float64Array): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length);
}

describe("the simulator's weather", () => {
  const scenario = scenarioWith({ noise: { f0WhitePpm: 0.3, f0WalkPpmPerRootDay: 0.03 }, surroundings: { leak: 0, sensorLagS: 0, dryingCoolsC: 0, pressureSwingPa: 2500 }, pace: { hoursPerStep: 8 } });
  const truth = trueDensitySlope(scenario);
  const series = (seed: number) => {
    const taken = phases(scenario, seed, 40).map(({ phase }) => phase);
    const densityKgM3 = Float64Array.from(taken, (phase) => airDensity({ temperatureC: phase.thermometerC, pressurePa: phase.pressurePa, humidityPercent: phase.humidityPercent }));
    return { atDays: column(taken, "atDays"), values: column(taken, "f0Hz"), densityKgM3 };
  };

  test("df0/dρ comes back within the stated uncertainty at its rate", { timeout: 300_000 }, () => {
    let held = 0;
    for (const seed of seeds) {
      const found = airDensityCorrection(series(seed));
      if (found.basis !== "regression") throw new Error(`no regression: ${JSON.stringify(found)}`);
      if (Math.abs(found.slope.value - truth) < 1.96 * found.slope.u) held++;
    }
    expect(held / seeds.length).toBeGreaterThan(least(0.92));
  });

  test("the weather is gone from the corrected references, by regression and by calibration", () => {
    const input = series(4);
    for (const slope of [undefined, { value: truth, u: Math.abs(truth) / 50 }]) {
      const found = airDensityCorrection({ ...input, slope });
      if (found.basis === "none") throw new Error(found.because);
      expect(scatter(found.corrected.values)).toBeLessThan(scatter(input.values) / 5);
    }
  });
});
