import type { Block, Definition } from "./schema";

type Lists = Pick<Definition, "blocks" | "park" | "cleaning">;

/** Calls `visit` for every block once, outermost first, with its dotted path: main line, `park` and `cleaning`. */
export function visitBlocks(lists: Lists, visit: (block: Block, path: string) => void): void {
  const each = (blocks: readonly Block[], at: string): void => {
    for (const [index, block] of blocks.entries()) {
      const path = `${at}.${index}`;
      visit(block, path);
      if ("blocks" in block) each(block.blocks, `${path}.blocks`);
      if (block.kind === "untilClean") visit(block.measure, `${path}.measure`);
    }
  };
  each(lists.blocks, "blocks");
  each(lists.park ?? [], "park");
  each(lists.cleaning ?? [], "cleaning");
}
