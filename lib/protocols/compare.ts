import type { Block, Definition } from "@/lib/protocol/schema";

/** How a block or limit differs from the one of the same id in another version. */
export type Difference = { kind: "onlyHere" } | { kind: "moved" } | { kind: "changed"; fields: ReadonlySet<string> };

type Place = { parent: string; index: number; own: Readonly<Record<string, unknown>> };

/**
 * Blocks and limits of `one` that `other` lacks, has elsewhere, or says otherwise, by id. Fields are dotted paths within the
 * block. A block is moved when it stands in another container, or in the same one in another order; those that others were
 * put before or taken from before are not.
 */
export function compareDefinitions(one: Definition, other: Definition): Map<string, Difference> {
  const [here, there] = [placesOf(one), placesOf(other)];
  const kept = inOrder(here, there);
  const found = new Map<string, Difference>();
  for (const [id, place] of here) {
    const twin = there.get(id);
    if (!twin) {
      found.set(id, { kind: "onlyHere" });
      continue;
    }
    const fields = changedFields(place.own, twin.own);
    if (fields.size > 0) found.set(id, { kind: "changed", fields });
    else if (!kept.has(id)) found.set(id, { kind: "moved" });
  }
  return found;
}

/** Dotted paths of the values that differ, of those that either side has. */
export function changedFields(one: unknown, other: unknown, at = ""): Set<string> {
  if (isRecord(one) && isRecord(other)) {
    const keys = new Set([...Object.keys(one), ...Object.keys(other)]);
    return new Set([...keys].flatMap((key) => [...changedFields(one[key], other[key], at ? `${at}.${key}` : key)]));
  }
  return JSON.stringify(one) === JSON.stringify(other) ? new Set() : new Set([at]);
}

function placesOf(definition: Definition): Map<string, Place> {
  const places = new Map<string, Place>();
  const visit = (blocks: readonly Block[], parent: string) => {
    for (const [index, block] of blocks.entries()) {
      const { blocks: inner, measure, ...own } = { blocks: undefined, measure: undefined, ...block };
      places.set(block.id, { parent, index, own });
      if (inner) visit(inner, block.id);
      if (measure) places.set(measure.id, { parent: block.id, index: Infinity, own: measure });
    }
  };
  for (const list of ["blocks", "cleaning", "park"] as const) visit(definition[list] ?? [], list);
  for (const [index, limit] of definition.limits.entries()) places.set(limit.id, { parent: "limits", index, own: limit });
  return places;
}

/** The ids that both have in the same container, but for as few as possible in the same order. */
function inOrder(here: ReadonlyMap<string, Place>, there: ReadonlyMap<string, Place>): Set<string> {
  const byParent = new Map<string, string[]>();
  for (const [id, { parent }] of here) if (there.get(id)?.parent === parent) byParent.set(parent, [...(byParent.get(parent) ?? []), id]);
  const indexThere = (id: string) => there.get(id)?.index ?? -1;
  return new Set([...byParent.values()].flatMap((ids) => longestRising(ids, indexThere)));
}

function longestRising(ids: readonly string[], of: (id: string) => number): string[] {
  const length: number[] = [];
  const before: number[] = [];
  let best = -1;
  for (let i = 0; i < ids.length; i++) {
    length[i] = 1;
    before[i] = -1;
    for (let j = 0; j < i; j++)
      if (of(ids[j]) < of(ids[i]) && length[j] >= length[i]) {
        length[i] = length[j] + 1;
        before[i] = j;
      }
    if (best < 0 || length[i] > length[best]) best = i;
  }
  const rising: string[] = [];
  for (let i = best; i >= 0; i = before[i]) rising.unshift(ids[i]);
  return rising;
}

const isRecord = (value: unknown): value is Record<string, unknown> => typeof value === "object" && value !== null && !Array.isArray(value);
