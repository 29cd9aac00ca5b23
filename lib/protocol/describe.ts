import { detourBlocks } from "./detours";
import { stepLabel } from "./labels";
import { type Frame, framesOf, leafAt } from "./path";
import type { Block, Definition } from "./schema";
import { sentenceParts, textOf } from "./sentence";
import type { Cursor, Detour } from "./types";

const DETOURS: Record<Detour["kind"], string> = {
  park: "parking",
  cleanAgain: "cleaning again",
  reference: "reference first",
  restore: "back to the phase",
};

/** Where a campaign stands, in words: `Cycle 4 of 12, 25 °C, water, turn 2 of 5, Measure water`. */
export function describe(definition: Definition, cursor: Cursor): string {
  if (cursor.finished) return "Finished";
  if (cursor.sequence === 0) return "Before the first step";
  const detour = cursor.detours.at(-1);
  const main = framesOf(definition.blocks, cursor.path) ?? [];
  const here = detour ? (framesOf(detourBlocks(definition, detour), detour.path) ?? []) : main;
  const leaf = leafAt(here);
  const isSearch = here.at(-1)?.entry.find && leaf?.kind === "measure";
  const total = cyclesOf(definition.blocks);
  const parts = [
    cursor.cycle > 0 ? `Cycle ${cursor.cycle}${total === undefined ? "" : ` of ${total}`}` : undefined,
    cursor.setPointC === null ? undefined : `${cursor.setPointC} °C`,
    ...turns(main),
    ...(detour ? [DETOURS[detour.kind], ...turns(here)] : []),
    isSearch ? `Find the resonance in ${leaf.medium}` : leaf && stepLabel(leaf),
  ];
  const text = parts.filter((part) => part !== undefined).join(", ");
  return text === "" ? "Between two steps" : text;
}

/** The loops inside the outermost `repeat`, which is the cycle itself. */
function turns(frames: readonly Frame[]): string[] {
  const outermost = frames.findIndex(({ block }) => block.kind === "repeat");
  return frames.flatMap(({ block, entry }, index) => {
    const turn = (entry.turn ?? 0) + 1;
    if (block.kind === "forEach") return "slots" in block.over ? [block.over.slots[turn - 1]] : [];
    if (block.kind === "untilClean") return [`cleaning, turn ${turn} of at most ${block.maxTimes}`];
    if (block.kind !== "repeat" || index === outermost) return [];
    return [block.times === undefined ? `turn ${turn}` : `turn ${turn} of ${block.times}`];
  });
}

/** Turns of outermost repeats over the whole protocol; undefined where dates or cleaning decide. */
export function cyclesOf(blocks: readonly Block[]): number | undefined {
  let total = 0;
  for (const block of blocks) {
    if (block.kind === "repeat") {
      if (block.times === undefined) return undefined;
      total += block.times;
    } else if (block.kind === "forEach") {
      const inside = cyclesOf(block.blocks);
      if (inside === undefined) return undefined;
      total += inside * ("slots" in block.over ? block.over.slots : block.over.temperaturesC).length;
    } else if (block.kind === "untilClean") {
      if (cyclesOf(block.blocks) !== 0) return undefined;
    }
  }
  return total;
}

/** A block as a sentence. What a container holds stands in sentences of its own. */
export function sentence(block: Block): string {
  return textOf(sentenceParts(block));
}
