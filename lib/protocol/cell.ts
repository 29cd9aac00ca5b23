import type { LeafBlock } from "./schema";
import type { Cell, Cursor } from "./types";

/** How a step ended; `open` where it has not, and the campaign leaves it all the same. */
export type Outcome = "done" | "failed" | "skipped" | "open";

/** Takes what a step did to the cell and the set-point into the cursor. */
export function book(draft: Cursor, block: LeafBlock, outcome: Outcome, nowMs: number): void {
  if (block.kind === "settle" && outcome === "done" && block.temperatureC !== "each") {
    draft.setPointC = block.temperatureC;
    draft.settled = block;
  }
  draft.cell = cellAfter(draft.cell, block, outcome, nowMs);
}

/**
 * What is in the cell after a step. A fill adds to the same liquid and replaces any other; a rinse leaves its liquid, so
 * that nobody takes the cell for empty; drain and dry leave air. What was begun and not done leaves it unknown.
 */
function cellAfter(cell: Cell, block: LeafBlock, outcome: Outcome, nowMs: number): Cell {
  const isDone = outcome === "done";
  switch (block.kind) {
    case "fill": {
      if (!isDone) return { content: "unknown" };
      const already = cell.content === "liquid" && cell.slot === block.slot && cell.by ? cell.volumeMl : 0;
      return { content: "liquid", slot: block.slot, volumeMl: already + block.volumeMl, sinceMs: nowMs, by: block };
    }
    case "rinse":
      if (!isDone) return { content: "unknown" };
      return { content: "liquid", slot: block.slot, volumeMl: block.volumeMl, sinceMs: nowMs };
    case "drain":
    case "dry":
      if (isDone) return { content: "air" };
      return cell.content === "air" ? cell : { content: "unknown" };
    default:
      return cell;
  }
}
