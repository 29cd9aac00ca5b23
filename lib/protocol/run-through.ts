import { endOfLocalDate } from "./local-time";
import { MadeUpWorld, type World } from "./made-up-world";
import { next } from "./next";
import { type Frame, framesOf } from "./path";
import type { Definition } from "./schema";
import type { Pace } from "./step-duration";
import type { Cursor, StepPlan } from "./types";

/** Sums over a run: steps, repeats, phases, asks, seconds in cycles, and `ml:` by slot. */
export type Counts = Map<string, number>;
export type RunThrough = { counts: Counts; seconds: number; cycles: number; isExact: boolean };

/** Up to here every turn is gone through; after it a repeat's third and later turns count as its second. */
const EXACT_STEPS = 600;
/** A bound on the work: after it a first turn is enough, also of a `forEach`, whose later values count like it. */
const MOST_STEPS = 10_000;

/** A turn of a container under way: what had been counted when it began. */
type Mark = { id: string; turn: number; counts: Counts; elapsedS: number };

/**
 * Goes through a protocol from its start with the interpreter itself, in a made-up world.
 *
 * Exact up to 600 steps. Then, when a `repeat` begins its third turn, what its second took (the first may hold searches) is
 * multiplied by the turns left but one, and the last turn is gone through again; a repeat up to a date has as many turns as
 * begin before it. So turns that differ by the time of day or the day of the week are taken alike from there on.
 */
export function runThrough(definition: Definition, world: World, pace: Pace, from: Cursor): RunThrough {
  const madeUp = new MadeUpWorld(definition, world, pace, from);
  const counts: Counts = new Map();
  let marks: Mark[] = [];
  let at = from;
  let isExact = true;
  for (let walked = 0; ; walked++) {
    const { cursor, action } = next(definition, at, madeUp.facts(at));
    at = cursor;
    if (action.do !== "step") return { counts, seconds: madeUp.elapsedS, cycles: at.cyclesBegun, isExact };
    const durationS = madeUp.durationS(action.step);

    const frames = framesOf(definition.blocks, at.path) ?? [];
    const begun = frames.findIndex(({ block, entry }, depth) => marks[depth]?.id !== block.id || marks[depth].turn !== entry.turn);
    const mark = begun < 0 ? undefined : marks[begun];
    if (mark && mark.id === frames[begun].block.id && walked >= EXACT_STEPS) {
      const skipped = turnsToSkip(frames[begun], mark, madeUp, { world, isLate: walked >= MOST_STEPS });
      if (skipped > 0) {
        isExact = false;
        at = skip({ at, frames, depth: begun, turns: skipped, mark, counts, madeUp });
      }
    }
    if (begun >= 0) {
      const fresh = at.path.slice(begun, -1).map(({ id, turn = 0 }) => ({ id, turn, counts: new Map(counts), elapsedS: madeUp.elapsedS }));
      marks = [...marks.slice(0, begun), ...fresh];
    }

    count(counts, action.step, durationS);
    madeUp.finish(action.step, durationS);
  }
}

function turnsToSkip(
  { block, entry }: Frame,
  mark: Mark,
  madeUp: MadeUpWorld,
  { world, isLate }: { world: World; isLate: boolean },
): number {
  const turn = entry.turn ?? 0;
  if (turn < (isLate ? 1 : 2)) return 0;
  if (block.kind === "repeat" && block.until !== undefined) {
    const leftS = (endOfLocalDate(block.until, world.timeZone) - madeUp.nowMs) / 1000;
    return Math.max(0, Math.ceil(leftS / (madeUp.elapsedS - mark.elapsedS)) - 1);
  }
  if (block.kind === "repeat") return (block.times ?? 0) - 1 - turn;
  if (block.kind !== "forEach" || !isLate) return 0;
  return ("slots" in block.over ? block.over.slots : block.over.temperaturesC).length - 1 - turn;
}

/** Counts the turn since `mark` once more for each turn left out, and sets the cursor to the last one. */
function skip({ at, frames, depth, turns, mark, counts, madeUp }: {
  at: Cursor;
  frames: readonly Frame[];
  depth: number;
  turns: number;
  mark: Mark;
  counts: Counts;
  madeUp: MadeUpWorld;
}): Cursor {
  for (const [key, value] of counts) counts.set(key, value + turns * (value - (mark.counts.get(key) ?? 0)));
  madeUp.elapsedS += turns * (madeUp.elapsedS - mark.elapsedS);
  const isCycle = frames[depth].block.kind === "repeat" && frames.findIndex(({ block }) => block.kind === "repeat") === depth;
  const path = at.path.map((entry, index) => (index === depth ? { ...entry, turn: (entry.turn ?? 0) + turns } : entry));
  return isCycle ? { ...at, path, cycle: at.cycle + turns, cyclesBegun: at.cyclesBegun + turns } : { ...at, path };
}

function count(counts: Counts, step: StepPlan, durationS: number): void {
  const add = (key: string, value: number) => counts.set(key, (counts.get(key) ?? 0) + value);
  add("steps", 1);
  if (step.cycle > 0) add("cycleSeconds", durationS);
  if (step.kind === "ask") add("asks", 1);
  if (step.kind === "measure" && step.role !== "find") {
    add("phases", 1);
    add("repeats", step.params.repeats);
    if (step.cycle > 0) {
      add("cyclePhases", 1);
      add("cycleRepeats", step.params.repeats);
    }
  }
  if (step.kind === "fill") add(`ml:${step.slot}`, step.params.volumeMl);
  if (step.kind === "rinse") add(`ml:${step.slot}`, step.params.volumeMl * step.params.times);
}
