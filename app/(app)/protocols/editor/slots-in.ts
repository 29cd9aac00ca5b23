import { at } from "@/lib/protocol/sentence";
import { type Draft, type DraftBlock, LISTS } from "@/lib/protocols/draft";

/** Names of slots that the draft uses so far, to choose from. */
export function slotsIn(draft: Draft): string[] {
  const slots = new Set<string>();
  const visit = (blocks: readonly DraftBlock[]) => {
    for (const block of blocks) {
      const list = at(block, "over.slots");
      for (const name of [block.slot, block.medium, ...(Array.isArray(list) ? list : [])]) if (typeof name === "string" && name !== "" && name !== "air" && name !== "each") slots.add(name);
      if (block.blocks) visit(block.blocks);
    }
  };
  for (const list of LISTS) visit(draft[list] ?? []);
  return [...slots];
}
