import { next, start } from "@/lib/protocol/interpreter";
import type { Definition } from "@/lib/protocol/schema";
import type { Action, Cursor, StepPlan } from "@/lib/protocol/types";
import { type Trace, traceOf } from "./oracle";
import type { TestWorld } from "./test-world";

/** What a database gives back of it. */
export function stored<T>(value: T): T {
  return JSON.parse(JSON.stringify(value)) as T;
}

export function isStep(action: Action): action is Extract<Action, { do: "step" }> {
  return action.do === "step";
}

export function endOf(action: Action): string {
  return action.do === "hold" ? `hold ${action.reason}` : action.do;
}

/** Goes on from a cursor until something else than a step comes, or for `limit` steps; every cursor goes through JSON. */
export function drive(definition: Definition, world: TestWorld, { from = start(definition), limit = 1000 }: { from?: Cursor; limit?: number } = {}) {
  const steps: StepPlan[] = [];
  let cursor = from;
  for (;;) {
    const answer = next(definition, cursor, world.facts);
    if (steps.length === limit) return { steps, cursor, action: answer.action };
    if (!isStep(answer.action)) return { steps, cursor: stored(answer.cursor), action: answer.action };
    cursor = stored(answer.cursor);
    steps.push(answer.action.step);
    world.do(answer.action.step);
  }
}

export function trace(definition: Definition, world: TestWorld, limit: number): Trace {
  const { steps, action } = drive(definition, world, { limit });
  return { steps: steps.map(traceOf), end: isStep(action) ? "limit" : endOf(action) };
}

/** Steps in brief: `fill a`, `reference air`, `settle 20`, `find air`. */
export function brief(steps: readonly StepPlan[]): string[] {
  return steps.map((step) => {
    if (step.kind === "measure") return `${step.role} ${step.medium}`;
    if (step.kind === "settle") return `settle ${step.params.temperatureC}`;
    return "slot" in step ? `${step.kind} ${step.slot}` : step.kind;
  });
}
