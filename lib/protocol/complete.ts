import type { ParsedBlock } from "./block-schema";
import type { Block, Definition, Limit, MeasureBlock, ParsedDefinition } from "./schema";

type ParsedMeasure = Extract<ParsedBlock, { kind: "measure" }>;

/** Makes the ids and roles that a parsed definition left out. */
export function complete(parsed: ParsedDefinition, makeId: () => string): Definition {
  const taken = new Set<string>();
  for (const list of [parsed.blocks, parsed.park, parsed.cleaning]) collectIds(list ?? [], taken);
  for (const limit of parsed.limits) if (limit.id !== undefined) taken.add(limit.id);

  const idFor = (id: string | undefined): string => {
    let made = id;
    while (made === undefined || (id === undefined && taken.has(made))) made = makeId();
    taken.add(made);
    return made;
  };

  const completeMeasure = (block: ParsedMeasure, role: MeasureBlock["role"]): MeasureBlock => ({
    ...block,
    id: idFor(block.id),
    role: block.role ?? role,
  });

  const completeBlock = (block: ParsedBlock): Block => {
    switch (block.kind) {
      case "measure":
        return completeMeasure(block, block.medium === "air" ? "reference" : "sample");
      case "untilClean":
        return {
          ...block,
          id: idFor(block.id),
          blocks: block.blocks.map(completeBlock),
          measure: completeMeasure(block.measure, "check"),
        };
      case "repeat":
        return { ...block, id: idFor(block.id), blocks: block.blocks.map(completeBlock) };
      case "forEach":
        return { ...block, id: idFor(block.id), blocks: block.blocks.map(completeBlock) };
      default:
        return { ...block, id: idFor(block.id) };
    }
  };

  return {
    ...parsed,
    blocks: parsed.blocks.map(completeBlock),
    park: parsed.park?.map(completeBlock),
    cleaning: parsed.cleaning?.map(completeBlock),
    limits: parsed.limits.map((limit): Limit => ({ ...limit, id: idFor(limit.id) })),
  };
}

function collectIds(blocks: readonly ParsedBlock[], into: Set<string>): void {
  for (const block of blocks) {
    if (block.id !== undefined) into.add(block.id);
    if ("blocks" in block) collectIds(block.blocks, into);
    if (block.kind === "untilClean" && block.measure.id !== undefined) into.add(block.measure.id);
  }
}
