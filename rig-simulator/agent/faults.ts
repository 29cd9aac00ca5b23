import type { Step } from "../contract";
import type { Scenario } from "../scenario";
import type { World } from "../world";

/** The agent lost its memory; what it had not sent is gone. */
export class Crash extends Error {}

type AtStep = { cycle?: number; sequence?: number; kind: string };

const matches = (at: AtStep, step: Step): boolean =>
  at.kind === step.kind &&
  (at.cycle === undefined || at.cycle === step.cycle) &&
  (at.sequence === undefined || at.sequence === step.sequence);

/** Throws the crash that the scenario has for this place, once. Half-way through a physical step is index 0. */
export function crashIfDue(scenario: Scenario, world: World, step: Step, index: number): void {
  scenario.faults.crashes.forEach((crash, i) => {
    const name = `crash ${i}`;
    if (!matches(crash, step) || index < crash.index || world.faultsDone[name]) return;
    world.faultsDone[name] = 1;
    throw new Crash(`crash at ${step.kind} ${step.sequence}, index ${index}`);
  });
}

/** The pump failure that is due at this step, counted. */
export const pumpFailure = ({ faults }: Scenario, world: World, step: Step): { retry: boolean } | undefined => dueFailure("pump", faults.pump, world, step);

/** The same of the thermostat. */
export const thermostatFailure = ({ faults }: Scenario, world: World, step: Step): { retry: boolean } | undefined =>
  dueFailure("thermostat", faults.thermostat.map((failure) => ({ ...failure, kind: "settle" })), world, step);

type Failure = AtStep & { times: number; retry: boolean };

function dueFailure(what: string, failures: readonly Failure[], world: World, step: Step): { retry: boolean } | undefined {
  for (const [i, failure] of failures.entries()) {
    const name = `${what} ${i}`;
    const done = world.faultsDone[name] ?? 0;
    if (!matches(failure, step) || done >= failure.times) continue;
    world.faultsDone[name] = done + 1;
    return { retry: failure.retry };
  }
  return undefined;
}
