import type { RinseStep, SettleStep, Step } from "./contract";
import type { Conditions } from "./physics/moment";
import type { Scenario } from "./scenario";

/**
 * The rig itself, apart from the agent that drives it: what is in the bottles, how warm the bath is, what its clock says. It survives
 * a crash of the agent. It changes only when a step is done, so a step that is begun again finds it as it was.
 */
export type World = {
  /** Of a simulated rig's clock at the last step's end; null before the first hello of a rig that runs in real time. */
  clockMs: number | null;
  setPointC: number;
  residualC: number;
  secondsSinceDry: number | null;
  fillSequence: number | null;
  rinses: number;
  cellMl: number;
  wasteMl: number;
  /** mL by port. */
  ports: Record<string, number>;
  /** How often each fault of the scenario has happened. */
  faultsDone: Record<string, number>;
  /** Reported empty or full: put right when the step comes again, since an operator has then answered. */
  awaiting: string[];
  /** The step last done and the world before it. */
  last?: { step: string; before: Omit<World, "last"> };
};

export function newWorld(scenario: Scenario, clockMs: number | null): World {
  return {
    clockMs,
    setPointC: scenario.surroundings.setPointC,
    residualC: 0,
    secondsSinceDry: null,
    fillSequence: null,
    rinses: 0,
    cellMl: 0,
    wasteMl: 0,
    ports: Object.fromEntries(scenario.rig.ports.map(({ port, volumeMl }) => [String(port), volumeMl])),
    faultsDone: {},
    awaiting: [],
  };
}

export const stepName = (step: Step): string => `${step.campaignNumber}/${step.sequence}`;

/** The world as it was when this step began: a step already done that is given out again starts from before. */
export function worldAt(world: World, step: Step): World {
  const { last, ...rest } = world;
  if (last?.step !== stepName(step)) return world;
  return { ...last.before, faultsDone: rest.faultsDone, awaiting: rest.awaiting };
}

/** The world after a step was done. Doing it twice is doing it once. */
export function worldAfter(world: World, step: Step, scenario: Scenario): World {
  const before = { ...worldAt(world, step) };
  delete before.last;
  const seconds = nominalSeconds(before, step, scenario);
  const after: World = {
    ...before,
    ports: { ...before.ports },
    clockMs: before.clockMs === null ? null : before.clockMs + Math.round(seconds * 1000),
    residualC: before.residualC * Math.exp(-seconds / scenario.surroundings.bathTimeConstantS),
    secondsSinceDry: before.secondsSinceDry === null ? null : before.secondsSinceDry + seconds,
    last: { step: stepName(step), before },
  };
  switch (step.kind) {
    case "fill":
      after.ports[step.params.port] -= step.params.volumeMl;
      after.cellMl += step.params.volumeMl;
      after.fillSequence = step.sequence;
      after.rinses = 0;
      after.secondsSinceDry = null;
      break;
    case "rinse":
      after.ports[step.params.port] -= step.params.volumeMl * step.params.times;
      after.wasteMl += step.params.volumeMl * step.params.times;
      after.rinses += step.params.times;
      after.secondsSinceDry = null;
      break;
    case "drain":
      after.wasteMl += before.cellMl;
      after.cellMl = 0;
      break;
    case "dry":
      after.secondsSinceDry = 0;
      break;
    case "settle":
      after.setPointC = step.params.temperatureC;
      after.residualC = offSetPoint(before, step) * Math.exp(-seconds / scenario.surroundings.bathTimeConstantS);
      break;
    case "measure":
      break;
  }
  return after;
}

/** How long a step takes by the rig's clock, in seconds. */
export function nominalSeconds(world: World, step: Step, scenario: Scenario): number {
  switch (step.kind) {
    case "measure":
      return step.params.repeats * repeatPeriodS(step.params);
    case "fill":
      return pumpingS(step.params.volumeMl, step.params.flowMlPerMin, scenario);
    case "rinse":
      return step.params.times * rinseOnceS(step, scenario);
    case "drain":
      return scenario.rig.drainS;
    case "dry":
      return step.params.seconds;
    case "settle":
      return settleS(world, step, scenario);
  }
}

export const repeatPeriodS = ({ sweep, pauseS }: { sweep: { points: number; dwellS: number }; pauseS: number }): number =>
  sweep.points * sweep.dwellS + pauseS;

export const pumpingS = (volumeMl: number, flowMlPerMin: number | undefined, scenario: Scenario): number =>
  (60 * volumeMl) / (flowMlPerMin ?? scenario.rig.flowMlPerMin);

export const rinseOnceS = ({ params }: RinseStep, scenario: Scenario): number =>
  pumpingS(params.volumeMl, params.flowMlPerMin, scenario) + scenario.rig.drainS;

/** Until the bath is within half the tolerance, then `holdS`. */
export function settleS(world: World, step: SettleStep, scenario: Scenario): number {
  const { toleranceC, holdS } = step.params;
  const start = Math.abs(offSetPoint(world, step));
  return Math.max(0, scenario.surroundings.bathTimeConstantS * Math.log((2 * start) / toleranceC || 1)) + holdS;
}

const offSetPoint = (world: World, { params }: SettleStep): number => world.setPointC + world.residualC - params.temperatureC;

/** What holds during a `measure` step that begins in this world. */
export function conditionsOf(world: World, step: Extract<Step, { kind: "measure" }>): Conditions {
  return {
    cycle: step.cycle,
    port: step.params.liquid?.port ?? null,
    periodS: repeatPeriodS(step.params),
    setPointC: world.setPointC,
    residualC: world.residualC,
    secondsSinceDry: world.secondsSinceDry,
    fillSequence: world.fillSequence,
    rinses: world.rinses,
  };
}
