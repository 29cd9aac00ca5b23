import fc from "fast-check";
import { type Block, type Definition, type DefinitionInput, parseDefinition } from "@/lib/protocol/schema";

type BlockInput = DefinitionInput["blocks"][number];
type MeasureInput = Extract<BlockInput, { kind: "measure" }>;

export const sweep: MeasureInput["sweep"] = {
  centre: "track",
  span: { halfWidths: 8 },
  points: 61,
  dwell: { ringDowns: 5 },
  driveV: 0.1,
};
const fixedSweep: MeasureInput["sweep"] = { centre: 8000, span: { hz: 100 }, points: 61, dwell: { s: 0.1 }, driveV: 0.1 };

/** A definition with the ids `b0`, `b1`, … in the order of the blocks, where it names none. */
export function define(blocks: BlockInput[], rest: Partial<Omit<DefinitionInput, "blocks">> = {}): Definition {
  let made = 0;
  const parsed = parseDefinition({ name: "Test", readout: "velocity", ...rest, blocks }, () => `b${made++}`);
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.errors));
  return parsed.definition;
}

export function measure(medium: string, more: Partial<MeasureInput> = {}): MeasureInput {
  return { kind: "measure", medium, repeats: 4, sweep: fixedSweep, ...more };
}

export const fill = (slot: string, id?: string): BlockInput => ({ kind: "fill", slot, volumeMl: 40, flowMlPerMin: 20, ...(id && { id }) });
export const drain: BlockInput = { kind: "drain" };
export const dry: BlockInput = { kind: "dry", seconds: 600 };
export const settle = (temperatureC: number | "each"): BlockInput => ({ kind: "settle", temperatureC, toleranceC: 0.05, holdS: 600, timeoutS: 7200 });

type Scope = { slots: boolean; temperatures: boolean };

/** Any definition of any kinds of blocks, nested up to `depth`, in UTC; dates lie around `startMs`. */
export function anyDefinition({ startMs, depth = 4 }: { startMs: number; depth?: number }): fc.Arbitrary<Definition> {
  return anyBlocks({ slots: false, temperatures: false }, depth, startMs).map((blocks) => define(blocks));
}

function anyBlocks(scope: Scope, depth: number, startMs: number): fc.Arbitrary<BlockInput[]> {
  return fc.array(anyBlock(scope, depth, startMs), { minLength: 1, maxLength: 3 });
}

function anyBlock(scope: Scope, depth: number, startMs: number): fc.Arbitrary<BlockInput> {
  const slot = fc.constantFrom("a", "b", ...(scope.slots ? ["each"] : []));
  const temperature = fc.constantFrom<(number | "each")[]>(20, 25, ...(scope.temperatures ? (["each"] as const) : []));
  const anySweep = fc.constantFrom(sweep, fixedSweep);
  const leaf = fc.oneof(
    fc.record({ medium: fc.oneof(slot, fc.constant("air")), sweep: anySweep }).map((given) => measure(given.medium, { sweep: given.sweep })),
    slot.map((name) => fill(name)),
    fc.constant(drain),
    slot.map((name): BlockInput => ({ kind: "rinse", slot: name, volumeMl: 5, times: 2 })),
    fc.constant(dry),
    temperature.map(settle),
    fc.integer({ min: 1, max: 90_000 }).map((seconds): BlockInput => ({ kind: "wait", seconds })),
    fc.constant<BlockInput>({ kind: "ask", instruction: "Look at the cell", urgency: "low" }),
  );
  if (depth <= 1) return leaf;

  const inside = (within: Scope) => anyBlocks(within, depth - 1, startMs);
  const date = fc.integer({ min: -2, max: 3 }).map((days) => new Date(startMs + days * 86_400_000).toISOString().slice(0, 10));
  const container = fc.oneof(
    fc.record({ times: fc.integer({ min: 1, max: 4 }), blocks: inside(scope) }).map((given): BlockInput => ({ kind: "repeat", ...given })),
    fc.record({ until: date, blocks: inside(scope) }).map((given): BlockInput => ({ kind: "repeat", ...given })),
    fc
      .record({ slots: fc.array(fc.constantFrom("a", "b", "c"), { minLength: 1, maxLength: 3 }), blocks: inside({ ...scope, slots: true }) })
      .map(({ slots, blocks }): BlockInput => ({ kind: "forEach", over: { slots }, blocks })),
    fc
      .record({ temperaturesC: fc.array(fc.constantFrom(10, 20, 30), { minLength: 1, maxLength: 3 }), blocks: inside({ ...scope, temperatures: true }) })
      .map(({ temperaturesC, blocks }): BlockInput => ({ kind: "forEach", over: { temperaturesC }, blocks })),
    fc
      .record({ blocks: inside(scope), sweep: anySweep, maxTimes: fc.integer({ min: 1, max: 3 }), otherwise: fc.constantFrom("hold" as const, "continue" as const, "stop" as const) })
      .map(({ sweep: checked, ...given }): BlockInput => ({ kind: "untilClean", tolerancePpm: 20, measure: measure("air", { sweep: checked }), ...given })),
  );
  return fc.oneof({ weight: 2, arbitrary: leaf }, { weight: 3, arbitrary: container });
}

export function idsOf(blocks: readonly Block[]): string[] {
  return blocks.flatMap((block) => [
    block.id,
    ...("blocks" in block ? idsOf(block.blocks) : []),
    ...(block.kind === "untilClean" ? [block.measure.id] : []),
  ]);
}
