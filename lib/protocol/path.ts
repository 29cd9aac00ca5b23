import type { Block, ContainerBlock, LeafBlock } from "./schema";
import type { PathEntry } from "./types";

/** One level of a path: the block, where it stands among its siblings, and the entry that counts its turns. */
export type Frame = { siblings: readonly Block[]; index: number; block: Block; entry: PathEntry };

export function isLeaf(block: Block): block is LeafBlock {
  return !isContainer(block);
}

export function isContainer(block: Block): block is ContainerBlock {
  return block.kind === "repeat" || block.kind === "forEach" || block.kind === "untilClean";
}

/** What a turn of a container runs; `untilClean` has two lists. */
export function held(block: ContainerBlock, stage: PathEntry["stage"]): readonly Block[] {
  return block.kind === "untilClean" && stage === "measure" ? [block.measure] : block.blocks;
}

/** The blocks on a path, outermost first. Undefined where an id of it does not exist any more. */
export function framesOf(blocks: readonly Block[], path: readonly PathEntry[]): Frame[] | undefined {
  const frames: Frame[] = [];
  let siblings: readonly Block[] = blocks;
  for (const entry of path) {
    const index = siblings.findIndex(({ id }) => id === entry.id);
    if (index < 0) return undefined;
    const block = siblings[index];
    frames.push({ siblings, index, block, entry });
    siblings = isContainer(block) ? held(block, entry.stage) : [];
  }
  return frames;
}

/** The block a path ends on, with `each` replaced by the value of the nearest enclosing `forEach` of that type. */
export function leafAt(frames: readonly Frame[]): LeafBlock | undefined {
  const last = frames.at(-1);
  return last && isLeaf(last.block) ? resolveEach(last.block, frames) : undefined;
}

function resolveEach(block: LeafBlock, frames: readonly Frame[]): LeafBlock {
  if (block.kind === "measure" && block.medium === "each") return { ...block, medium: eachSlot(frames) };
  if ((block.kind === "fill" || block.kind === "rinse") && block.slot === "each")
    return { ...block, slot: eachSlot(frames) };
  if (block.kind === "settle" && block.temperatureC === "each")
    return { ...block, temperatureC: eachTemperature(frames) };
  return block;
}

function eachSlot(frames: readonly Frame[]): string {
  for (const { block, entry } of frames.toReversed())
    if (block.kind === "forEach" && "slots" in block.over) return block.over.slots[entry.turn ?? 0];
  throw new RangeError("each stands outside a forEach over slots");
}

function eachTemperature(frames: readonly Frame[]): number {
  for (const { block, entry } of frames.toReversed())
    if (block.kind === "forEach" && "temperaturesC" in block.over) return block.over.temperaturesC[entry.turn ?? 0];
  throw new RangeError("each stands outside a forEach over temperatures");
}
