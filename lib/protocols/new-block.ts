import type { Block, Limit } from "@/lib/protocol/schema";
import type { DraftBlock, DraftLimit } from "@/lib/protocols/draft";

export type BlockKind = Block["kind"];
export type LimitKind = Limit["kind"];

/** Kinds in the order in which they are offered. */
export const BLOCK_WORDS: Readonly<Record<BlockKind, { word: string; what: string }>> = {
  measure: { word: "Measure", what: "a phase of repeats in air or a liquid" },
  fill: { word: "Fill", what: "liquid into the cell" },
  drain: { word: "Drain", what: "the cell" },
  rinse: { word: "Rinse", what: "with a liquid, some times" },
  dry: { word: "Dry", what: "with air" },
  settle: { word: "Settle", what: "at a temperature" },
  wait: { word: "Wait", what: "a time, or until a time of day" },
  ask: { word: "Ask a person", what: "and wait for the answer" },
  repeat: { word: "Repeat", what: "steps some times, or until a date" },
  untilClean: { word: "Clean until back in air", what: "steps, then an air check" },
  forEach: { word: "For each", what: "of some liquids or temperatures" },
};

export const LIMIT_WORDS: Readonly<Record<LimitKind, string>> = {
  return: "The reference does not come back",
  drift: "A slow drift",
  step: "A sudden step",
  noise: "More noise than at first",
  fit: "Fits fail",
  temperature: "The cell's temperature",
  silence: "The rig is silent",
  count: "Steps fail in a row",
};

const sweep = { centre: "track", span: { halfWidths: 8 }, points: 101, dwell: { ringDowns: 5 }, driveV: 0.02 };

const FIELDS: Readonly<Record<BlockKind, Readonly<Record<string, unknown>>>> = {
  measure: { medium: "air", repeats: 60, discard: 0, pauseS: 10, sweep },
  fill: { slot: "sample", volumeMl: 40, flowMlPerMin: 20 },
  drain: {},
  rinse: { slot: "rinse", volumeMl: 20, times: 2 },
  dry: { seconds: 1800, flowMlPerMin: 600 },
  settle: { temperatureC: 25, toleranceC: 0.05, holdS: 1200, timeoutS: 14_400 },
  wait: { seconds: 600 },
  ask: { instruction: "", urgency: "normal" },
  repeat: { times: 10 },
  untilClean: { tolerancePpm: 15, maxTimes: 3, otherwise: "hold" },
  forEach: { over: { temperaturesC: [20, 25, 30] } },
};

const LIMIT_FIELDS: Readonly<Record<LimitKind, Readonly<Record<string, unknown>>>> = {
  return: { tolerancePpm: 15, medium: "air" },
  drift: { quantity: "f0", ppmPerDay: 1 },
  step: { quantity: "f0", sigma: 3 },
  noise: { quantity: "f0", factor: 4 },
  fit: { sharePercent: 20 },
  temperature: { minC: 15, maxC: 35 },
  silence: { afterS: 1800 },
  count: { failedSteps: 3 },
};

/** A block to begin from; containers hold what they are mostly for, so that they are never empty. */
export function newBlock(kind: BlockKind, makeId: () => string): DraftBlock {
  const block = { id: makeId(), kind, ...FIELDS[kind] };
  switch (kind) {
    case "repeat":
      return { ...block, blocks: [newBlock("measure", makeId)] };
    case "untilClean":
      return {
        ...block,
        blocks: (["drain", "rinse", "drain", "dry"] as const).map((inner) => newBlock(inner, makeId)),
        measure: { ...newBlock("measure", makeId), role: "check", repeats: 10 },
      };
    case "forEach":
      return { ...block, blocks: [{ ...newBlock("settle", makeId), temperatureC: "each" }, newBlock("measure", makeId)] };
    default:
      return block;
  }
}

export function newLimit(kind: LimitKind, makeId: () => string, before?: DraftLimit): DraftLimit {
  return { does: before?.does ?? ["mail"], ...LIMIT_FIELDS[kind], id: before?.id ?? makeId(), kind };
}
