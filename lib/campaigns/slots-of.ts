import type { Block, Definition } from "@/lib/protocol/schema";

/** Names of the slots that a protocol uses, in the order in which it names them; those of cleaning and park too. */
export function slotsOf(definition: Definition): string[] {
  const slots = new Set<string>();
  for (const blocks of [definition.blocks, definition.cleaning, definition.park]) if (blocks) collect(blocks, slots);
  return [...slots];
}

function collect(blocks: readonly Block[], into: Set<string>): void {
  for (const block of blocks) {
    if (block.kind === "measure" && block.medium !== "air" && block.medium !== "each") into.add(block.medium);
    if ((block.kind === "fill" || block.kind === "rinse") && block.slot !== "each") into.add(block.slot);
    if (block.kind === "forEach" && "slots" in block.over) for (const slot of block.over.slots) into.add(slot);
    if ("blocks" in block) collect(block.blocks, into);
  }
}
