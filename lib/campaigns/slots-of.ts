import type { Definition } from "@/lib/protocol/schema";
import { visitBlocks } from "@/lib/protocol/visit-blocks";

/** Names of the slots that a protocol uses, in the order in which it names them; those of cleaning and park too. */
export function slotsOf(definition: Definition): string[] {
  const slots = new Set<string>();
  visitBlocks(definition, (block) => {
    if (block.kind === "measure" && block.medium !== "air" && block.medium !== "each") slots.add(block.medium);
    if ((block.kind === "fill" || block.kind === "rinse") && block.slot !== "each") slots.add(block.slot);
    if (block.kind === "forEach" && "slots" in block.over) for (const slot of block.over.slots) slots.add(slot);
  });
  return [...slots];
}
