import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { takeReading } from "@/rig-simulator/agent/measure";
import type { MeasureStep, Reading } from "@/rig-simulator/contract";
import { loadScenario, scenarioNames } from "@/rig-simulator/load-scenario";
import { flicker, randomWalk } from "@/rig-simulator/physics/noise";
import { keyOf, normal, uniform } from "@/rig-simulator/physics/random";
import type { Conditions, Moment } from "@/rig-simulator/physics/moment";
import { nominalInAir, truth } from "@/rig-simulator/physics/truth";
import { memoryStore, Rig } from "@/rig-simulator/rig";
import { scenarioSchema, type Scenario } from "@/rig-simulator/scenario";
import { conditionsOf } from "@/rig-simulator/world";

const still = { f0WhitePpm: 0, f0FlickerPpm: 0, f0WalkPpmPerRootDay: 0, qWhitePercent: 0, qFlickerPercent: 0, fillScatterKgM3: 0 };
const calm = { ambientSwingC: 0, leak: 0, wanderC: 0, thermometerNoiseC: 0, dryingCoolsC: 0, pressureSwingPa: 0, humiditySwingPercent: 0 };

const quick = (more: object): Scenario => scenarioSchema.parse({ ...loadScenario("quick"), noise: still, surroundings: calm, changes: {}, pace: { hoursPerStep: 1 }, ...more });
const moment = (sequence: number, index = 0, seed = 1): Moment => ({ seed, campaignNumber: 1, sequence, index });
const inAir: Conditions = { cycle: 0, port: null, periodS: 60, setPointC: 20, residualC: 0, secondsSinceDry: null, fillSequence: null, rinses: 3 };

const unchanged = truth(quick({}), moment(1), inAir);

const ppm = (scenario: Scenario, at: Moment, conditions = inAir): number =>
  (truth(scenario, at, conditions).f0Hz / unchanged.f0Hz - 1) * 1e6;
const qPercent = (scenario: Scenario, at: Moment, conditions = inAir): number =>
  (truth(scenario, at, conditions).q / unchanged.q - 1) * 100;

const mean = (values: readonly number[]): number => values.reduce((sum, value) => sum + value, 0) / values.length;
const sd = (values: readonly number[]): number => {
  const centre = mean(values);
  return Math.sqrt(mean(values.map((value) => (value - centre) ** 2)));
};

describe("random numbers without a state", () => {
  it("are standard normal and uniform", () => {
    const normals = Array.from({ length: 20_000 }, (_, i) => normal(keyOf(3, i)));
    expect(Math.abs(mean(normals))).toBeLessThan(0.03);
    expect(sd(normals)).toBeCloseTo(1, 1);
    expect(mean(normals.map((value) => value ** 4))).toBeCloseTo(3, 0);
    const uniforms = Array.from({ length: 20_000 }, (_, i) => uniform(keyOf(4, i)));
    expect(mean(uniforms)).toBeCloseTo(0.5, 2);
    expect(sd(uniforms)).toBeCloseTo(Math.sqrt(1 / 12), 2);
  });

  it("do not follow from a neighbour in any part of the key", () => {
    const at = (i: number, j: number) => normal(keyOf(5, i, j));
    for (const shift of [[1, 0], [0, 1], [1, -1]]) {
      const products = Array.from({ length: 10_000 }, (_, i) => at(i % 100, Math.floor(i / 100)) * at((i % 100) + shift[0], Math.floor(i / 100) + shift[1]));
      expect(Math.abs(mean(products))).toBeLessThan(0.04);
    }
  });
});

describe("slow noise", () => {
  /** Overlapping Allan deviation at m samples, straight from its definition. */
  const deviation = (values: readonly number[], m: number): number => {
    const sums = [0];
    for (const value of values) sums.push(sums[sums.length - 1] + value);
    const terms = Array.from({ length: values.length - 2 * m + 1 }, (_, j) => ((sums[j + 2 * m] - 2 * sums[j + m] + sums[j]) / m) ** 2);
    return Math.sqrt(mean(terms) / 2);
  };

  it("flicker has a level Allan deviation near 1 from minutes to days", () => {
    const runs = Array.from({ length: 4 }, (_, seed) => Array.from({ length: 8192 }, (_, i) => flicker(keyOf(seed, 1), i * 60)));
    for (const m of [4, 16, 64, 256, 512]) {
      const level = Math.sqrt(mean(runs.map((run) => deviation(run, m) ** 2)));
      expect(level).toBeGreaterThan(0.85);
      expect(level).toBeLessThan(1.15);
    }
  });

  it("the random walk spreads with the root of days, and its steps are independent", () => {
    const steps = (from: number, to: number) => Array.from({ length: 2000 }, (_, seed) => randomWalk(keyOf(seed, 2), to * 86_400) - randomWalk(keyOf(seed, 2), from * 86_400));
    expect(sd(steps(10, 11))).toBeCloseTo(1, 1);
    expect(sd(steps(10, 14)) / 2).toBeCloseTo(1, 1);
    const first = steps(20, 23);
    const second = steps(23, 26);
    expect(Math.abs(mean(first.map((value, i) => value * second[i])))).toBeLessThan(0.2);
    expect(randomWalk(keyOf(1), 0)).toBe(0);
    expect(() => randomWalk(keyOf(1), -1)).toThrow(RangeError);
  });
});

describe("truth", () => {
  it("is the same in any order and as often as asked", () => {
    const scenario = loadScenario("north-bench");
    const conditions = { ...inAir, cycle: 33, secondsSinceDry: 100 };
    fc.assert(
      fc.property(fc.array(fc.record({ sequence: fc.integer({ min: 1, max: 500 }), index: fc.integer({ min: 0, max: 300 }) }), { minLength: 2, maxLength: 10 }), (places) => {
        const forwards = places.map(({ sequence, index }) => truth(scenario, moment(sequence, index), conditions));
        const backwards = [...places].reverse().map(({ sequence, index }) => truth(scenario, moment(sequence, index), conditions)).reverse();
        expect(backwards).toEqual(forwards);
      }),
      { numRuns: 30 },
    );
  });

  it("differs with seed and campaign", () => {
    const scenario = loadScenario("north-bench");
    const f0 = (seed: number, campaignNumber: number) => truth(scenario, { seed, campaignNumber, sequence: 9, index: 4 }, inAir).f0Hz;
    expect(new Set([f0(1, 1), f0(2, 1), f0(1, 2)]).size).toBe(3);
  });

  it("drifts by the day of the nominal pace", () => {
    const scenario = quick({ changes: { drift: [{ fromHours: 24, f0PpmPerDay: 3, qPercentPerDay: -0.2 }] } });
    expect(ppm(scenario, moment(20))).toBe(0);
    expect(ppm(scenario, moment(25 + 48))).toBeCloseTo(6, 6);
    expect(qPercent(scenario, moment(25 + 48))).toBeCloseTo(-0.4, 8);
    expect(ppm(scenario, moment(73, 60))).toBeCloseTo(6.125, 6);
  });

  it("ages with the logarithm of time", () => {
    const scenario = quick({ changes: { ageing: { f0Ppm: -2, timeConstantHours: 10 } } });
    expect(ppm(scenario, moment(1))).toBe(0);
    expect(ppm(scenario, moment(101))).toBeCloseTo(-2 * Math.log(11), 6);
  });

  it("keeps residue from its cycle on, less of it after extra rinses", () => {
    const scenario = quick({ changes: { residue: { fromCycle: 5, f0PpmPerCycle: -2, qPercentPerCycle: -0.1, usualRinses: 3, keptPerExtraRinse: 0.5 } } });
    expect(ppm(scenario, moment(1), { ...inAir, cycle: 4 })).toBe(0);
    expect(ppm(scenario, moment(1), { ...inAir, cycle: 9 })).toBeCloseTo(-10, 6);
    expect(ppm(scenario, moment(1), { ...inAir, cycle: 9, rinses: 5 })).toBeCloseTo(-2.5, 6);
    expect(qPercent(scenario, moment(1), { ...inAir, cycle: 9 })).toBeCloseTo(-0.5, 8);
  });

  it("slips once and stays", () => {
    const scenario = quick({ changes: { slips: [{ fromCycle: 7, f0Ppm: 20, qPercent: -1 }] } });
    expect([6, 7, 30].map((cycle) => ppm(scenario, moment(1), { ...inAir, cycle }))).toEqual([0, expect.closeTo(20, 6), expect.closeTo(20, 6)]);
  });

  it("is colder after drying and returns, which the thermometer does not show", () => {
    const scenario = quick({ surroundings: { ...calm, dryingCoolsC: 0.5, coolingTimeConstantS: 600 } });
    const after = (index: number) => truth(scenario, moment(1, index), { ...inAir, secondsSinceDry: 0 }).climate;
    expect(after(0).sensorC).toBeCloseTo(19.5, 9);
    expect(after(10).sensorC).toBeCloseTo(20 - 0.5 * Math.exp(-1), 9);
    expect(after(0).thermometerC).toBe(20);
  });

  it("follows the bath to its set-point, and the room with its lag", () => {
    const bath = quick({ surroundings: { ...calm, bathTimeConstantS: 300 } });
    expect(truth(bath, moment(1, 5), { ...inAir, residualC: 0.1 }).climate.sensorC).toBeCloseTo(20 + 0.1 * Math.exp(-1), 9);
    const room = quick({ surroundings: { ...calm, leak: 0.1, ambientC: 20, ambientSwingC: 2, startHour: 15, sensorLagS: 6 * 3600 } });
    expect(truth(room, moment(1), inAir).climate.thermometerC).toBeCloseTo(20.2, 9);
    expect(truth(room, moment(1), inAir).climate.sensorC).toBeCloseTo(20, 9);
    expect(truth(room, moment(7), inAir).climate.sensorC).toBeCloseTo(20.2, 9);
  });

  it("sees a bubble only in the liquid, the cycle and the repeats that it is in", () => {
    const scenario = quick({ changes: { bubbles: [{ cycle: 2, repeats: 5, share: 0.01 }] } });
    const density = (cycle: number, index: number) => truth(scenario, moment(1, index), { ...inAir, cycle, port: 1 }).fluid.densityKgM3;
    expect(density(2, 4) / density(2, 5)).toBeCloseTo(0.99, 9);
    expect(density(3, 4)).toBe(density(2, 5));
  });

  it("scatters from filling to filling, not within one", () => {
    const scenario = quick({ noise: { ...still, fillScatterKgM3: 0.3 } });
    const density = (fillSequence: number, index = 0) => truth(scenario, moment(1, index), { ...inAir, port: 1, fillSequence }).fluid.densityKgM3;
    expect(density(3, 7)).toBe(density(3, 0));
    expect(sd(Array.from({ length: 500 }, (_, i) => density(i)))).toBeCloseTo(0.3, 1);
  });

  it("has the white noise of f0 and Q that the scenario says", () => {
    const scenario = quick({ noise: { ...still, f0WhitePpm: 0.5, qWhitePercent: 0.1 } });
    const places = Array.from({ length: 2000 }, (_, index) => moment(3, index));
    expect(sd(places.map((place) => ppm(scenario, place)))).toBeCloseTo(0.5, 1);
    expect(sd(places.map((place) => qPercent(scenario, place)))).toBeCloseTo(0.1, 2);
  });

  it("goes with the liquid on the port and says so where there is none", () => {
    const water = truth(quick({}), moment(1), { ...inAir, port: 1 });
    expect(water.fluid.densityKgM3).toBeCloseTo(998.2067, 3);
    expect(water.q).toBeLessThan(200);
    expect(() => truth(quick({}), moment(1), { ...inAir, port: 9 })).toThrow(/port 9/);
    expect(() => truth(quick({}), moment(1), { ...inAir, port: 1, setPointC: 55 })).toThrow(/water/);
  });
});

describe("the scenarios of the demo laboratory", () => {
  it.each(scenarioNames())("%s has a sensor above 2 kHz with Q at most 2 500 in air, so that five ring-downs a point fit", (name) => {
    const { f0Hz, q } = nominalInAir(loadScenario(name));
    expect(f0Hz).toBeGreaterThanOrEqual(2000);
    expect(q).toBeLessThanOrEqual(2500);
  });

  it.each(scenarioNames())("%s has a signal in every liquid of at least 20 times its noise", (name) => {
    const scenario = loadScenario(name);
    const air = nominalInAir(scenario);
    for (const { port } of scenario.rig.ports) {
      const { f0Hz, q } = truth(scenario, moment(1), { ...inAir, port, setPointC: scenario.surroundings.setPointC });
      const peakV = (0.1 * scenario.signal.peakVPerV * q * f0Hz) / (air.q * air.f0Hz);
      expect(peakV / scenario.signal.noiseV).toBeGreaterThan(20);
    }
  });

  it("a reading is JSON of whole nanovolts, the same for the same place", () => {
    const rig = new Rig({ scenario: loadScenario("north-bench"), seed: 3, speed: { kind: "fast" }, store: memoryStore(), clockStartMs: 0 });
    const step: MeasureStep = {
      id: "1", campaignId: "1", campaignNumber: 1, sequence: 4, attempt: 1, lease: "l", resumeFrom: 0, cycle: 1, label: "", kind: "measure",
      params: { medium: "air", repeats: 3, pauseS: 0, sweep: { startHz: 2750, stopHz: 2770, points: 61, dwellS: 1, driveV: 0.5 } },
    };
    const reading = takeReading(rig, step, conditionsOf(rig.world, step), 2, 1000);
    expect(takeReading(rig, step, conditionsOf(rig.world, step), 2, 1000)).toEqual(reading);
    const re = (one: Reading): number[] => ("sweep" in one && "re" in one.sweep ? one.sweep.re : []);
    expect(re(takeReading(rig, step, conditionsOf(rig.world, step), 1, 1000))).not.toEqual(re(reading));
    expect(re(reading)).toHaveLength(61);
    for (const volts of re(reading)) expect(Math.abs(volts * 1e9 - Math.round(volts * 1e9))).toBeLessThan(1e-4);
  });
});
