import type { Segment } from "@/lib/protocol/forecast";
import type { Definition } from "@/lib/protocol/schema";
import { visitBlocks } from "@/lib/protocol/visit-blocks";

export type Ring = { at: number; label: string };

type Plan = {
  definition: Definition;
  segments: readonly Pick<Segment, "blockId" | "kind" | "slot" | "startS">[];
  /** When it begins, ms. */
  fromMs: number;
  isMounted: boolean;
  /** By slot: what its bottle will hold at the beginning, and the letter of its liquid. */
  bottles: Readonly<Record<string, { ml: number; letter: string }>>;
  wasteMl: number;
  wasteCapacityMl: number | null;
};

/**
 * When a planned campaign needs a person: to mount the sensor, to answer what the protocol asks, to load a bottle before the fill
 * that it no longer holds enough for, to empty the waste before it would overflow. A bottle that was loaded is taken to last. Pure.
 *
 * @returns Times in ms with a word each, in the order of time.
 */
export function peopleNeeded({ definition, segments, fromMs, isMounted, bottles, wasteMl, wasteCapacityMl }: Plan): Ring[] {
  const volumes = new Map<string, number>();
  visitBlocks(definition, (block) => {
    if (block.kind === "fill") volumes.set(block.id, block.volumeMl);
    if (block.kind === "rinse") volumes.set(block.id, block.volumeMl * block.times);
  });
  const rings: Ring[] = isMounted ? [] : [{ at: fromMs, label: "mount" }];
  const left = new Map(Object.entries(bottles).map(([slot, { ml }]) => [slot, ml]));
  let waste = wasteMl;
  for (const { blockId, kind, slot, startS } of segments) {
    const at = fromMs + startS * 1000;
    if (kind === "ask") rings.push({ at, label: "asked" });
    if ((kind !== "fill" && kind !== "rinse") || slot === undefined) continue;
    const ml = volumes.get(blockId) ?? 0;
    const rest = (left.get(slot) ?? Infinity) - ml;
    if (rest < 0) rings.push({ at, label: `load ${bottles[slot].letter}` });
    left.set(slot, rest < 0 ? Infinity : rest);
    if (wasteCapacityMl !== null && waste + ml > wasteCapacityMl) {
      rings.push({ at, label: "waste" });
      waste = 0;
    }
    waste += ml;
  }
  return rings;
}
