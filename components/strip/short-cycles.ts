/** Cycles under 8 px cannot keep their shape: runs of them become blocks, one a liquid. Pure. */
import type { StripSegment } from "./strip-input";
import type { Tint } from "./tint";

export type StripBlock = {
  letter: string;
  tint: Tint;
  cycles: number;
  x0: number;
  x1: number;
  /** The past ends and the plan begins here; x1 when all is past, x0 when all is planned. */
  xNow: number;
  /** Share of its time in which the cell holds liquid. */
  full: number;
  /** Places of its segments in the strip. */
  indices: number[];
};

export const SHORTEST_CYCLE_PX = 8;
/** Cleans and dries of at least this width keep their shape and part the blocks. */
const KEEPS_SHAPE_PX = 4;

type Cycle = { letter: string; tint: Tint; from: number; to: number; liquid: number; indices: number[] };

export function shortCycleBlocks(segments: readonly StripSegment[], x: (at: string) => number, { now, width }: { now?: number; width: number }): StripBlock[] {
  const blocks: StripBlock[] = [];
  let run: Cycle[] = [];
  const close = () => {
    if (run.length > 1) blocks.push(...blocksOf(run, now, width));
    run = [];
  };
  for (const cycle of cyclesOf(segments, x)) {
    if (cycle === "breaks" || cycle.to - cycle.from >= SHORTEST_CYCLE_PX || cycle.letter === "") close();
    else run.push(cycle);
  }
  close();
  return blocks;
}

/** Cycles in the order of time; `breaks` where something stands between them that keeps its own shape. */
function* cyclesOf(segments: readonly StripSegment[], x: (at: string) => number): Generator<Cycle | "breaks"> {
  let open: { number: number; cycle: Cycle } | undefined;
  for (const [index, segment] of segments.entries()) {
    const from = x(segment.from);
    const to = x(segment.to);
    const ownShape = !segment.cycle || segment.kind === "held" || segment.kind === "end" || ((segment.kind === "clean" || segment.kind === "dry") && to - from >= KEEPS_SHAPE_PX);
    if (ownShape || open?.number !== segment.cycle) {
      if (open) yield open.cycle;
      open = undefined;
    }
    if (ownShape) {
      yield "breaks";
      continue;
    }
    open ??= { number: segment.cycle ?? 0, cycle: { letter: "", tint: 1, from, to, liquid: 0, indices: [] } };
    open.cycle.to = to;
    open.cycle.indices.push(index);
    if (segment.kind === "liquid") {
      open.cycle.liquid += to - from;
      if (!open.cycle.letter) Object.assign(open.cycle, { letter: segment.letter ?? "", tint: segment.tint ?? 1 });
    }
  }
  if (open) yield open.cycle;
}

/** One block a liquid; where liquids change so often that a block would be no wider than a cycle, one block for all, named after both. */
function blocksOf(run: readonly Cycle[], now: number | undefined, width: number): StripBlock[] {
  const groups: Cycle[][] = [];
  for (const cycle of run) {
    const last = groups[groups.length - 1];
    if (last?.[0]?.letter === cycle.letter) last.push(cycle);
    else groups.push([cycle]);
  }
  const tooFine = groups.length > 1 && run.length / groups.length < 3;
  return (tooFine ? [run] : groups).flatMap((cycles) => {
    const first = cycles[0];
    const last = cycles[cycles.length - 1];
    if (!first || !last || last.to < 0 || first.from > width) return [];
    const x0 = Math.max(0, first.from);
    const x1 = Math.min(width, last.to);
    const time = cycles.reduce((sum, { from, to }) => sum + to - from, 0);
    return [
      {
        letter: [...new Set(cycles.map(({ letter }) => letter))].join(", "),
        tint: first.tint,
        cycles: cycles.length,
        x0,
        x1,
        xNow: now === undefined ? x1 : Math.max(x0, Math.min(x1, now)),
        full: time > 0 ? cycles.reduce((sum, { liquid }) => sum + liquid, 0) / time : 0,
        indices: cycles.flatMap(({ indices }) => indices),
      },
    ];
  });
}
