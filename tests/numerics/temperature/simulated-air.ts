import { air } from "@/rig-simulator/physics/medium";
import type { Conditions } from "@/rig-simulator/physics/moment";
import { resonanceIn, truth } from "@/rig-simulator/physics/truth";
import { loadScenario } from "@/rig-simulator/load-scenario";
import { scenarioSchema, type Scenario } from "@/rig-simulator/scenario";

const repeats = 20;
const periodS = 60;

/** The quick scenario with other surroundings, noise, changes. */
export const scenarioWith = (more: object): Scenario => scenarioSchema.parse({ ...loadScenario("quick"), changes: {}, pace: { hoursPerStep: 2 }, ...more });

export type AirPhase = { atDays: number; fromDays: number; toDays: number; f0Hz: number; q: number; thermometerC: number; sensorC: number; pressurePa: number; humidityPercent: number };

/** Means over one phase in air of what a perfect instrument would show, and the repeats' thermometer readings. */
export function airPhase(scenario: Scenario, { sequence, seed, ...more }: { sequence: number; seed: number } & Partial<Conditions>) {
  const conditions: Conditions = { cycle: 0, port: null, periodS, setPointC: 20, residualC: 0, secondsSinceDry: null, fillSequence: null, rinses: 3, ...more };
  const startDays = ((sequence - 1) * scenario.pace.hoursPerStep) / 24;
  const taken = Array.from({ length: repeats }, (_, index) => truth(scenario, { seed, campaignNumber: 1, sequence, index }, conditions));
  const mean = (of: (one: (typeof taken)[number]) => number) => taken.reduce((sum, one) => sum + of(one), 0) / repeats;
  const days = taken.map((_, index) => startDays + (index * periodS) / 86_400);
  const phase: AirPhase = {
    fromDays: startDays,
    toDays: days[repeats - 1],
    atDays: (startDays + days[repeats - 1]) / 2,
    f0Hz: mean(({ f0Hz }) => f0Hz),
    q: mean(({ q }) => q),
    thermometerC: mean(({ climate }) => climate.thermometerC),
    sensorC: mean(({ climate }) => climate.sensorC),
    pressurePa: mean(({ climate }) => climate.pressurePa),
    humidityPercent: mean(({ climate }) => climate.humidityPercent),
  };
  return { phase, readings: taken.map(({ climate }, i) => ({ atDays: days[i], temperatureC: climate.thermometerC })) };
}

/** df0/dT at 20 °C and at the surroundings' pressure and humidity, straight from the simulator's physics, Hz per K. */
export function trueTemperatureCoefficient(scenario: Scenario): number {
  const { pressurePa, humidityPercent } = scenario.surroundings;
  const f0At = (t: number) => resonanceIn(scenario, air(t, pressurePa, humidityPercent), t).f0Hz;
  return (f0At(20.01) - f0At(19.99)) / 0.02;
}

/** df0/dρ in air at 20 °C, Hz per kg/m³. */
export function trueDensitySlope(scenario: Scenario): number {
  const at = (pressurePa: number) => {
    const fluid = air(20, pressurePa, 45);
    return { rho: fluid.densityKgM3, f0: resonanceIn(scenario, fluid, 20).f0Hz };
  };
  const [low, high] = [at(100_000), at(102_000)];
  return (high.f0 - low.f0) / (high.rho - low.rho);
}

export const column = <K extends keyof AirPhase>(phases: readonly AirPhase[], key: K): Float64Array => Float64Array.from(phases, (phase) => phase[key]);
