import type { Problem } from "./problems";
import type { Block, Definition, MeasureBlock } from "./schema";

/** What is in the cell and what has been measured, as far as reading the protocol tells. */
type State = { content: string; hasReference: boolean };

/** Blocks read at most, so that loops over long lists within each other end; what follows is not told of. */
const MOST_BLOCKS = 100_000;

/**
 * Reads the protocol through, every loop twice and every slot of a `forEach` once, and tells where a liquid is missing, left
 * or filled over, and where something is judged or measured before there is a reference.
 */
export function cellProblems(definition: Definition): Problem[] {
  const found = new Map<string, Problem>();
  let read = 0;
  const warn = (path: string, message: string) => found.set(`${path} ${message}`, { path, severity: "warning", message });

  const run = (blocks: readonly Block[], at: string, slot: string, before: State): State => {
    let state = before;
    for (const [index, block] of blocks.entries()) if (++read <= MOST_BLOCKS) state = one(block, `${at}.${index}`, slot, state);
    return state;
  };

  const one = (block: Block, path: string, slot: string, state: State): State => {
    const own = "slot" in block && block.slot !== "each" ? block.slot : slot;
    switch (block.kind) {
      case "fill":
        if (state.content !== "air" && state.content !== `rinsed ${own}`)
          warn(path, `The cell still holds ${state.content.replace("rinsed ", "")} here: drain it first.`);
        return { ...state, content: own };
      case "rinse":
        return { ...state, content: `rinsed ${own}` };
      case "drain":
      case "dry":
        return { ...state, content: "air" };
      case "measure":
        return measured(block, path, slot, state);
      case "repeat": {
        const once = run(block.blocks, `${path}.blocks`, slot, state);
        return block.times === 1 ? once : run(block.blocks, `${path}.blocks`, slot, once);
      }
      case "forEach": {
        const values = "slots" in block.over ? [...new Set(block.over.slots)] : block.over.temperaturesC.slice(0, 2).map(() => slot);
        return values.reduce((reached, value) => run(block.blocks, `${path}.blocks`, value, reached), state);
      }
      case "untilClean": {
        if (!state.hasReference) warn(path, "There is no reference yet to compare with here, so one turn passes unjudged.");
        const once = run(block.blocks, `${path}.blocks`, slot, state);
        const checked = measured(block.measure, `${path}.measure`, slot, once);
        return block.maxTimes === 1 ? checked : run(block.blocks, `${path}.blocks`, slot, checked);
      }
      default:
        return state;
    }
  };

  const measured = ({ medium: written, role }: MeasureBlock, path: string, slot: string, state: State): State => {
    const medium = written === "each" ? slot : written;
    const content = state.content.replace("rinsed ", "");
    if (medium !== content) warn(path, `This measures ${medium}, but the cell holds ${content} here.`);
    if (role === "sample" && !state.hasReference) warn(path, "Nothing has been measured as a reference before this sample.");
    return { ...state, hasReference: state.hasReference || role === "reference" };
  };

  const end = run(definition.blocks, "blocks", "", { content: "air", hasReference: false });
  if (end.content !== "air" && read <= MOST_BLOCKS) warn("blocks", `The protocol ends with ${end.content.replace("rinsed ", "")} in the cell.`);
  if (usesLiquid(definition.blocks) && !definition.park?.length)
    warn("park", "Nothing says how to park: a campaign that is stopped leaves its liquid in the cell.");
  if (!end.hasReference)
    for (const [index, { kind }] of definition.limits.entries())
      if (kind === "return") warn(`limits.${index}`, "There is no reference in the protocol that could return.");
  return [...found.values()];
}

function usesLiquid(blocks: readonly Block[]): boolean {
  return blocks.some((block) => block.kind === "fill" || block.kind === "rinse" || ("blocks" in block && usesLiquid(block.blocks)));
}
