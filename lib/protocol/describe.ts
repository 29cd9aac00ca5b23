import { detourBlocks } from "./detours";
import { duration, stepLabel } from "./labels";
import { type Frame, framesOf, leafAt } from "./path";
import type { Block, Definition } from "./schema";
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

/** A block as a sentence, for the editor and the protocol's page. What a container holds stands in sentences of its own. */
export function sentence(block: Block): string {
  switch (block.kind) {
    case "measure": {
      const what = block.medium === "air" ? `air as ${{ reference: "the reference", check: "a check", sample: "a sample" }[block.role]}` : `${nameOf(block.medium)}${block.role === "sample" ? "" : ` as a ${block.role}`}`;
      const left = block.discard > 0 ? `, the first ${block.discard} left out` : "";
      const pause = block.pauseS > 0 ? `, ${duration(block.pauseS)} apart` : "";
      return `Measure ${what}, ${count(block.repeats, "repeat")}${left}${pause}.`;
    }
    case "fill":
      return `Fill ${block.volumeMl} mL of ${nameOf(block.slot)} at ${block.flowMlPerMin} mL/min.`;
    case "drain":
      return "Drain the cell.";
    case "rinse":
      return `Rinse ${count(block.times, "time")} with ${block.volumeMl} mL of ${nameOf(block.slot)}.`;
    case "dry":
      return `Dry for ${duration(block.seconds)}${block.flowMlPerMin === undefined ? "" : ` at ${block.flowMlPerMin} mL/min`}.`;
    case "settle": {
      const at = block.temperatureC === "each" ? "each temperature" : `${block.temperatureC} °C`;
      return `Settle at ${at} within ${block.toleranceC} °C for ${duration(block.holdS)}, at most ${duration(block.timeoutS)}.`;
    }
    case "wait":
      return `${stepLabel(block)}.`;
    case "ask":
      return `Ask a person: ${block.instruction}`;
    case "repeat":
      return block.until === undefined ? `Repeat ${count(block.times ?? 0, "time")}.` : `Repeat until ${block.until} is over.`;
    case "untilClean":
      return `Clean until air is back within ${block.tolerancePpm} ppm${
        block.toleranceQPercent === undefined ? "" : ` and ${block.toleranceQPercent} % in Q`
      }, at most ${count(block.maxTimes, "time")}, otherwise ${block.otherwise === "continue" ? "go on" : block.otherwise}.`;
    case "forEach":
      return "slots" in block.over
        ? `For each of ${block.over.slots.join(", ")}.`
        : `At each of ${block.over.temperaturesC.join(", ")} °C.`;
  }
}

function nameOf(slot: string): string {
  return slot === "each" ? "each liquid" : slot;
}

function count(n: number, unit: string): string {
  return `${n.toLocaleString("en").replaceAll(",", " ")} ${unit}${n === 1 ? "" : "s"}`;
}
