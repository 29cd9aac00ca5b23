import type { Scenario } from "../scenario";
import { changes } from "./changes";
import { climate, type Climate } from "./climate";
import { immersedResonance, type Fluid, type Resonance } from "./immersed";
import { air, medium } from "./medium";
import { campaignKey, elapsedS, repeatKey, type Conditions, type Moment } from "./moment";
import { flicker, randomWalk } from "./noise";
import { processes } from "./processes";
import { normal } from "./random";
import { tubeResonance } from "./tube";

export type Truth = Resonance & { climate: Climate; fluid: Fluid };

/**
 * What a repeat would show to a perfect instrument: the true f0 and Q while it was taken. A pure function: the same moment under the
 * same conditions gives the same numbers, in any order, after any crash.
 */
export function truth(scenario: Scenario, moment: Moment, conditions: Conditions): Truth {
  const here = climate(scenario, moment, conditions);
  const fluid = medium(scenario, moment, conditions, here);
  const { f0Hz, q } = resonanceIn(scenario, fluid, here.sensorC);
  const shift = changes(scenario, moment, conditions);

  const { noise } = scenario;
  const seconds = elapsedS(scenario, moment, conditions.periodS);
  const f0Ppm =
    shift.f0Ppm +
    noise.f0WhitePpm * normal(repeatKey(moment, processes.f0White)) +
    noise.f0FlickerPpm * flicker(campaignKey(moment, processes.f0Flicker), seconds) +
    noise.f0WalkPpmPerRootDay * randomWalk(campaignKey(moment, processes.f0Walk), seconds);
  const qPercent =
    shift.qPercent +
    noise.qWhitePercent * normal(repeatKey(moment, processes.qWhite)) +
    noise.qFlickerPercent * flicker(campaignKey(moment, processes.qFlicker), seconds);

  return { f0Hz: f0Hz * (1 + f0Ppm * 1e-6), q: q * (1 + qPercent / 100), climate: here, fluid };
}

/** The sensor as made, without noise or change, in a fluid at a temperature. */
export function resonanceIn({ sensor: { body, thermal } }: Scenario, fluid: Fluid, temperatureC: number): Resonance {
  const { f0Hz, q } = body.shape === "rod" ? immersedResonance(body, fluid) : tubeResonance(body, fluid);
  const dT = temperatureC - thermal.referenceC;
  return { f0Hz: f0Hz * (1 + (thermal.ppmPerK * dT + thermal.ppmPerK2 * dT * dT) * 1e-6), q };
}

/** f0 and Q in dry air at 20 °C and 101 325 Pa: what a laboratory would write down as nominal, and what the signal's peak refers to. */
export const nominalInAir = (scenario: Scenario): Resonance => resonanceIn(scenario, air(20, 101_325, 0), 20);
