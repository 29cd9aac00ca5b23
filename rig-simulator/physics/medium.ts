import { airDensity, airDensityRange } from "@/lib/fluids/air-density";
import { airViscosity } from "@/lib/fluids/air-viscosity";
import { liquidProperties } from "@/lib/fluids/liquid-properties";
import type { Scenario } from "../scenario";
import type { Climate } from "./climate";
import type { Fluid } from "./immersed";
import { campaignKey, type Conditions, type Moment } from "./moment";
import { processes } from "./processes";
import { derive, normal } from "./random";

/** The fluid around or in the sensor at one repeat. Throws FluidRangeError where a liquid is not known at the temperature. */
export function medium(scenario: Scenario, moment: Moment, conditions: Conditions, { sensorC, pressurePa, humidityPercent }: Climate): Fluid {
  if (conditions.port === null) return air(sensorC, pressurePa, humidityPercent);

  const loaded = scenario.rig.ports.find(({ port }) => port === conditions.port);
  if (!loaded) throw new RangeError(`Nothing is loaded on port ${conditions.port}`);
  const fluid = liquidProperties(loaded.liquid, sensorC);
  const scatter =
    scenario.noise.fillScatterKgM3 * normal(derive(campaignKey(moment, processes.fill), conditions.fillSequence ?? 0));
  const bubble = scenario.changes.bubbles.find(
    ({ cycle, repeats }) => cycle === conditions.cycle && moment.index < repeats,
  );
  return {
    densityKgM3: (fluid.densityKgM3 + scatter) * (1 - (bubble?.share ?? 0)),
    viscosityMPaS: fluid.viscosityMPaS,
  };
}

/** CIPM-2007 inside its range of temperature; beyond, the gas law from the nearer end, as a real rig's air would. */
export function air(temperatureC: number, pressurePa: number, humidityPercent: number): Fluid {
  const nearestC = Math.min(Math.max(temperatureC, airDensityRange.minC), airDensityRange.maxC);
  const densityKgM3 =
    (airDensity({ temperatureC: nearestC, pressurePa, humidityPercent }) * (nearestC + 273.15)) / (temperatureC + 273.15);
  return { densityKgM3, viscosityMPaS: airViscosity({ temperatureC, densityKgM3 }) };
}
