import type { Scenario } from "../scenario";
import { campaignKey, elapsedS, repeatKey, type Conditions, type Moment } from "./moment";
import { flicker } from "./noise";
import { processes } from "./processes";
import { derive, normal, uniform, type Key } from "./random";

export type Climate = {
  /** What the sensor really has. */
  sensorC: number;
  /** What the thermometer in the bath shows. */
  thermometerC: number;
  pressurePa: number;
  humidityPercent: number;
};

/**
 * Temperature, pressure and humidity of one repeat.
 *
 * The bath returns exponentially to its set-point and lets through a share of the room's daily cycle; the sensor sees that later, and
 * is colder after drying, which the thermometer does not show.
 */
export function climate(scenario: Scenario, moment: Moment, conditions: Conditions): Climate {
  const s = scenario.surroundings;
  const seconds = elapsedS(scenario, moment, conditions.periodS);
  const intoStep = moment.index * conditions.periodS;

  const bath = conditions.setPointC + conditions.residualC * Math.exp(-intoStep / s.bathTimeConstantS);
  const wander = s.wanderC * flicker(campaignKey(moment, processes.bathWander), seconds);
  const leak = (at: number): number => s.leak * (roomC(scenario, at) - conditions.setPointC);
  const cold =
    conditions.secondsSinceDry === null
      ? 0
      : s.dryingCoolsC * Math.exp(-(conditions.secondsSinceDry + intoStep) / s.coolingTimeConstantS);

  return {
    sensorC: bath + wander + leak(seconds - s.sensorLagS) - cold,
    thermometerC: bath + wander + leak(seconds) + s.thermometerNoiseC * normal(repeatKey(moment, processes.thermometer)),
    pressurePa: s.pressurePa + s.pressureSwingPa * weather(campaignKey(moment, processes.weather), seconds),
    humidityPercent: Math.min(95, Math.max(5, s.humidityPercent + s.humiditySwingPercent * weather(campaignKey(moment, processes.humidity), seconds))),
  };
}

/** The room is warmest at 15:00. */
function roomC(scenario: Scenario, seconds: number): number {
  const s = scenario.surroundings;
  const hourOfDay = s.startHour + seconds / 3600;
  return s.ambientC + s.ambientSwingC * Math.cos((2 * Math.PI * (hourOfDay - 15)) / 24);
}

/** Slow and smooth, between −1 and 1: three waves of 2 to 11 days. */
function weather(key: Key, seconds: number): number {
  let sum = 0;
  for (let wave = 0; wave < 3; wave++) {
    const own = derive(key, wave);
    const periodS = 86_400 * (2 + 3 * wave + 3 * uniform(derive(own, 1)));
    sum += Math.sin(2 * Math.PI * (seconds / periodS + uniform(derive(own, 2))));
  }
  return sum / 3;
}
