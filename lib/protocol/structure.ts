import type { z } from "zod";
import type { ParsedBlock } from "./block-schema";
import type { ParsedDefinition } from "./schema";

export const MAX_DEPTH = 8;
export const MAX_BLOCKS = 2000;

type Path = (string | number)[];
type Report = (path: Path, message: string) => void;
type Scope = { slots: boolean; temperatures: boolean };

/** The rules that reach across blocks: ids, nesting, `each`, and what limits need. */
export function checkStructure(definition: ParsedDefinition, context: z.RefinementCtx): void {
  const report: Report = (path, message) => context.addIssue({ code: "custom", path, message });
  const ids = new Map<string, Path>();
  const claim = (id: string | undefined, path: Path) => {
    if (id === undefined) return;
    const first = ids.get(id);
    if (first) report([...path, "id"], `The id ${id} is taken by ${first.join(".")}`);
    else ids.set(id, path);
  };

  const visit = (blocks: readonly ParsedBlock[], at: Path, depth: number, scope: Scope): number => {
    let count = 0;
    for (const [index, block] of blocks.entries()) {
      const path = [...at, index];
      count++;
      claim(block.id, path);
      checkEach(block, path, scope, report);
      if (depth > MAX_DEPTH) {
        report(path, `Blocks are nested at most ${MAX_DEPTH} deep`);
        continue;
      }
      if (block.kind === "untilClean") {
        claim(block.measure.id, [...path, "measure"]);
        count++;
      }
      if ("blocks" in block) count += visit(block.blocks, [...path, "blocks"], depth + 1, within(block, scope));
    }
    return count;
  };

  const outside = { slots: false, temperatures: false };
  let count = 0;
  for (const list of ["blocks", "park", "cleaning"] as const) count += visit(definition[list] ?? [], [list], 1, outside);
  if (count > MAX_BLOCKS) report(["blocks"], `A protocol has at most ${MAX_BLOCKS} blocks; this one has ${count}`);

  for (const [index, limit] of definition.limits.entries()) {
    claim(limit.id, ["limits", index]);
    if (limit.does.includes("cleanAgain") && !definition.cleaning?.length)
      report(["limits", index, "does"], "cleanAgain needs the protocol to say how to clean (cleaning)");
  }
  if (definition.parkAfterS !== undefined && !definition.park?.length)
    report(["parkAfterS"], "parkAfterS needs the protocol to say how to park (park)");
}

function within(block: ParsedBlock, scope: Scope): Scope {
  if (block.kind !== "forEach") return scope;
  return "slots" in block.over ? { ...scope, slots: true } : { ...scope, temperatures: true };
}

function checkEach(block: ParsedBlock, path: Path, scope: Scope, report: Report): void {
  if ("slot" in block && block.slot === "each" && !scope.slots)
    report([...path, "slot"], "each stands only inside a forEach over slots");
  if (block.kind === "measure" && block.medium === "each" && !scope.slots)
    report([...path, "medium"], "each stands only inside a forEach over slots");
  if (block.kind === "settle" && block.temperatureC === "each" && !scope.temperatures)
    report([...path, "temperatureC"], "each stands only inside a forEach over temperatures");
}
