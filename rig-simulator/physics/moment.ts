import type { Scenario } from "../scenario";
import { keyOf, type Key } from "./random";

/** Names one repeat. Nothing but this and the step's conditions decides what the rig measures. */
export type Moment = { seed: number; campaignNumber: number; sequence: number; index: number };

/** What holds during one `measure` step: from the step itself and from the steps that were done before it. */
export type Conditions = {
  cycle: number;
  /** The port of the liquid in the cell, or null for air. */
  port: number | null;
  /** Seconds from the start of one repeat to the next. */
  periodS: number;
  setPointC: number;
  /** Bath minus set-point when the step begins. */
  residualC: number;
  /** Since the sensor was last dried, when the step begins; null when a liquid came after. */
  secondsSinceDry: number | null;
  /** Sequence number of the filling. */
  fillSequence: number | null;
  /** Times the cell was rinsed since the last filling. */
  rinses: number;
};

/**
 * Time of a repeat as the physics knows it, in seconds from the campaign's start: steps one nominal pace apart, repeats their period
 * apart. Drift, ageing, weather and slow noise run on it, so that they do not depend on waits, retries or the speed of the run.
 */
export function elapsedS(scenario: Scenario, moment: Moment, periodS: number): number {
  return (moment.sequence - 1) * scenario.pace.hoursPerStep * 3600 + moment.index * periodS;
}

export const campaignKey = (moment: Moment, process: number): Key => keyOf(moment.seed, moment.campaignNumber, process);

export const repeatKey = (moment: Moment, process: number): Key =>
  keyOf(moment.seed, moment.campaignNumber, process, moment.sequence, moment.index);
