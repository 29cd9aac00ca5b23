import type { Block, Definition, MeasureBlock } from "@/lib/protocol/schema";
import type { StepPlan } from "@/lib/protocol/types";
import { f0Hz, type TestWorld } from "./test-world";

export type Trace = { steps: string[]; end: string };

/** A step without its numbers in Hz: what, of which block, where in the campaign. */
export function traceOf(step: StepPlan): string {
  const what =
    step.kind === "measure" ? `${step.role} ${step.medium}` : step.kind === "settle" ? step.params.temperatureC : "slot" in step ? step.slot : "";
  return [step.sequence, step.kind, step.blockId, what, step.cycle, step.setPointC, step.detour ?? ""].join(" ");
}

class End extends Error {}

/**
 * The plain reading of the protocol rules: walks the tree with ordinary recursion and does every step as it comes. It keeps no
 * cursor and can be stopped only by its limit; UTC only.
 */
export function expand(definition: Definition, world: TestWorld, limit: number): Trace {
  const steps: string[] = [];
  let cyclesBegun = 0;
  let setPointC: number | null = null;

  type Scope = { slot?: string; temperatureC?: number; cycle: number };
  const emit = (step: string[], plan: StepPlan) => {
    if (steps.length === limit) throw new End("limit");
    steps.push(step.join(" "));
    return world.do(plan);
  };
  const base = (blockId: string, { cycle }: Scope) => ({ sequence: steps.length + 1, blockId, cycle, setPointC, label: "" });
  const trace = (block: { kind: string; id: string }, what: unknown, { cycle }: Scope, detour = "") =>
    [steps.length + 1, block.kind, block.id, what, cycle, setPointC, detour].map(String).map((text) => (text === "null" ? "" : text));

  const measureOnce = (block: MeasureBlock, role: "find" | MeasureBlock["role"], scope: Scope, detour = "") => {
    const medium = block.medium === "each" ? (scope.slot ?? "") : block.medium;
    return emit(trace(block, `${role} ${medium}`, scope, detour), {
      ...base(block.id, scope),
      kind: "measure",
      medium,
      role,
      params: { repeats: 1, discard: 0, pauseS: 0, sweep: { startHz: 1, stopHz: 2, points: 11, dwellS: 1, driveV: 1 } },
    });
  };

  const measure = (block: MeasureBlock, scope: Scope) => {
    const medium = block.medium === "each" ? (scope.slot ?? "") : block.medium;
    const tracked = block.sweep.centre === "track";
    if (tracked && !world.facts.tracks[`${medium}|${setPointC ?? ""}`]) measureOnce(block, "find", scope, "find");
    const phase = measureOnce(block, block.role, scope);
    if (!tracked || !phase || phase.unusable <= 2) return phase;
    measureOnce(block, "find", scope, "find");
    const again = measureOnce(block, block.role, scope, "again");
    if (again && again.unusable > 2) throw new End("hold failure");
    return again;
  };

  /** Returns how many steps it made. */
  const run = (blocks: readonly Block[], scope: Scope, inRepeat: boolean): number => {
    const before = steps.length;
    for (const block of blocks) one(block, scope, inRepeat);
    return steps.length - before;
  };

  const one = (block: Block, scope: Scope, inRepeat: boolean): void => {
    switch (block.kind) {
      case "measure":
        measure(block, scope);
        return;
      case "repeat":
        for (let turn = 0; block.until ? world.facts.nowMs < Date.parse(block.until) + 86_400_000 : turn < (block.times ?? 0); turn++) {
          const cycle = inRepeat ? scope.cycle : ++cyclesBegun;
          if (run(block.blocks, { ...scope, cycle }, true) > 0) continue;
          if (!inRepeat) cyclesBegun--;
          return;
        }
        return;
      case "forEach": {
        const scopes: Scope[] =
          "slots" in block.over
            ? block.over.slots.map((slot) => ({ ...scope, slot }))
            : block.over.temperaturesC.map((temperatureC) => ({ ...scope, temperatureC }));
        for (const inner of scopes) if (run(block.blocks, inner, inRepeat) === 0) return;
        return;
      }
      case "untilClean":
        for (let turn = 1; turn <= block.maxTimes; turn++) {
          run(block.blocks, scope, inRepeat);
          const phase = measure(block.measure, scope);
          if (!world.facts.baseline || phase?.f0Hz === f0Hz) return;
        }
        if (block.otherwise !== "continue") throw new End(block.otherwise === "hold" ? "hold limit" : "stop");
        return;
      default: {
        const slot = "slot" in block ? (block.slot === "each" ? (scope.slot ?? "") : block.slot) : "";
        const temperatureC = block.kind === "settle" ? (block.temperatureC === "each" ? (scope.temperatureC ?? NaN) : block.temperatureC) : "";
        emit(trace(block, slot || temperatureC, scope), { ...base(block.id, scope), kind: "drain", params: {} });
        if (block.kind === "settle") setPointC = Number(temperatureC);
      }
    }
  };

  try {
    run(definition.blocks, { cycle: 0 }, false);
    return { steps, end: "finish" };
  } catch (end) {
    if (end instanceof End) return { steps, end: end.message };
    throw end;
  }
}
