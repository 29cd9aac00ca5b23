import { framesOf, leafAt } from "./path";
import type { Block, Definition, LeafBlock, MeasureBlock } from "./schema";
import type { Cell, CellState, Cursor, Detour } from "./types";

/** The blocks that a detour runs. */
export function detourBlocks(definition: Definition, detour: Detour): readonly Block[] {
  switch (detour.kind) {
    case "park":
      return definition.park ?? [];
    case "cleanAgain":
      return definition.cleaning ?? [];
    case "reference": {
      const block = detour.measureId === undefined ? undefined : findMeasure(definition, ({ id }) => id === detour.measureId);
      return block ? [{ ...block, medium: detour.medium ?? block.medium }] : [];
    }
    case "restore":
      return detour.blocks ?? [];
  }
}

/** Does what a detour needs before its first step; true where another one has been put before it. */
export function prepareDetour(definition: Definition, draft: Cursor, detour: Detour): boolean {
  if (detour.path.length > 0) return false;
  if (detour.kind === "reference" && detour.medium === "air" && draft.cell.content !== "air") {
    draft.detours.push({ kind: "restore", path: [], cycle: detour.cycle, blocks: [drainBlock(definition)] });
    return true;
  }
  if (detour.kind === "restore" && detour.wanted && !detour.blocks)
    detour.blocks = restoring(definition, draft, detour.wanted);
  return false;
}

/** The reference to measure out of turn: the first of the present set-point, else the first that the protocol names. */
export function referenceDetour(definition: Definition, draft: Cursor, limitIds?: string[]): Detour | undefined {
  const { reference } = draft;
  const stillThere = reference && findMeasure(definition, ({ id }) => id === reference.measureId) ? reference : undefined;
  const known = stillThere ?? firstReference(definition);
  return known && {
    kind: "reference",
    path: [],
    cycle: draft.cycle,
    measureId: known.measureId,
    medium: known.medium,
    ...(limitIds && { limitIds }),
  };
}

/** The cell and set-point of a moment, to come back to. */
export function cellState({ cell, settled }: Cursor): CellState {
  return { cell, settled: settled ?? null };
}

/**
 * The steps that bring set-point and cell back to what the main line's next block counts on. A block that empties or
 * flushes the cell first counts on no liquid, one that settles brings its own set-point.
 */
function restoring(definition: Definition, draft: Cursor, wanted: CellState): LeafBlock[] {
  const next = leafAt(framesOf(definition.blocks, draft.path) ?? []);
  const blocks: LeafBlock[] = [];
  const countsOnCell = next && next.kind !== "drain" && next.kind !== "rinse" && next.kind !== "dry";
  if (countsOnCell && !isSame(draft.cell, wanted.cell)) {
    if (draft.cell.content !== "air") blocks.push(drainBlock(definition));
    if (wanted.cell.content === "liquid" && wanted.cell.by) blocks.push(wanted.cell.by);
  }
  if (next && next.kind !== "settle" && wanted.settled && wanted.settled.temperatureC !== draft.setPointC)
    blocks.push(wanted.settled);
  return blocks;
}

/** Whether there is nothing to do to the cell: what is wanted is in it, or is no fill that could be made again. */
function isSame(cell: Cell, wanted: Cell): boolean {
  if (wanted.content === "air") return cell.content === "air";
  if (wanted.content !== "liquid" || !wanted.by) return true;
  return cell.content === "liquid" && cell.slot === wanted.slot && cell.by !== undefined;
}

/** A drain that the protocol does not name at this place goes by the id of one that it has, if any. */
function drainBlock(definition: Definition): LeafBlock {
  const lists = [definition.park ?? [], definition.cleaning ?? [], definition.blocks];
  return firstOf(lists.flat(), (block) => (block.kind === "drain" ? block : undefined)) ?? { id: "drain", kind: "drain" };
}

function firstReference(definition: Definition): { measureId: string; medium: string } | undefined {
  const block = findMeasure(definition, ({ role, medium }) => role === "reference" && medium !== "each");
  return block && { measureId: block.id, medium: block.medium };
}

function findMeasure(definition: Definition, isWanted: (block: MeasureBlock) => boolean): MeasureBlock | undefined {
  return firstOf(definition.blocks, (block) => {
    if (block.kind === "measure" && isWanted(block)) return block;
    return block.kind === "untilClean" && isWanted(block.measure) ? block.measure : undefined;
  });
}

function firstOf<T>(blocks: readonly Block[], pick: (block: Block) => T | undefined): T | undefined {
  for (const block of blocks) {
    const found = pick(block) ?? ("blocks" in block ? firstOf(block.blocks, pick) : undefined);
    if (found !== undefined) return found;
  }
  return undefined;
}
