import type { Scenario } from "../scenario";
import { elapsedS, type Conditions, type Moment } from "./moment";

export type Shift = { f0Ppm: number; qPercent: number };

/** What time, cleaning and accidents have done to the sensor: drift, creep, ageing, residue and slips, added up. */
export function changes(scenario: Scenario, moment: Moment, conditions: Conditions): Shift {
  const hours = elapsedS(scenario, moment, conditions.periodS) / 3600;
  const { cycle } = conditions;
  const { drift, creep, ageing, residue, slips } = scenario.changes;
  const total: Shift = { f0Ppm: 0, qPercent: 0 };
  const add = (f0Ppm: number, qPercent: number): void => {
    total.f0Ppm += f0Ppm;
    total.qPercent += qPercent;
  };

  for (const one of drift) {
    const days = Math.max(0, hours - one.fromHours) / 24;
    add(one.f0PpmPerDay * days, one.qPercentPerDay * days);
  }
  for (const one of creep) {
    const cycles = Math.max(0, cycle - one.fromCycle + 1);
    add(one.f0PpmPerCycle * cycles, one.qPercentPerCycle * cycles);
  }
  if (ageing) {
    const growth = Math.log1p(hours / ageing.timeConstantHours);
    add(ageing.f0Ppm * growth, ageing.qPercent * growth);
  }
  if (residue) {
    const extra = Math.max(0, conditions.rinses - residue.usualRinses);
    const left = Math.max(0, cycle - residue.fromCycle + 1) * residue.keptPerExtraRinse ** extra;
    add(residue.f0PpmPerCycle * left, residue.qPercentPerCycle * left);
  }
  for (const slip of slips) {
    if (cycle >= (slip.fromCycle ?? 0) && hours >= (slip.fromHours ?? 0)) add(slip.f0Ppm, slip.qPercent);
  }
  return total;
}
