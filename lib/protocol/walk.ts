import { endOfLocalDate } from "./local-time";
import { type Frame, framesOf, held, isContainer } from "./path";
import type { Block, RepeatBlock, UntilCleanBlock } from "./schema";
import type { PathEntry } from "./types";

export type WalkContext = {
  nowMs: number;
  timeZone: string;
  /** Whether the check that the path stands on found the sensor clean. */
  isClean: (block: UntilCleanBlock) => boolean;
};

export type Walked =
  | {
      to: "block";
      path: PathEntry[];
      /** Turns of an outermost `repeat` begun on the way. */
      cyclesBegun: number;
      inRepeat: boolean;
    }
  | { to: "end"; cyclesBegun: number }
  /** An `untilClean` has used up its turns. */
  | { to: "hold" | "stop"; block: UntilCleanBlock };

/** `begunHere`: this walk began its present turn. `counted`: and counted it as a cycle. */
type WalkFrame = Frame & { begunHere?: boolean; counted?: boolean };

/**
 * From the block a path ends on to the next one to be made, through as many ends and beginnings of loops as lie between.
 *
 * `after` leaves the last block of the path; `into` begins the blocks of the container that the path ends on, without
 * counting a turn. An empty path begins at the first block. A turn in which there is nothing to do (all its dates are
 * over) ends its loop and is not counted; so the cost is bound by the depth and the siblings passed, never by turns.
 */
export function walk(
  blocks: readonly Block[],
  path: readonly PathEntry[],
  how: "after" | "into",
  context: WalkContext,
): Walked {
  const frames: WalkFrame[] = existing(framesOf(blocks, path.map((entry) => ({ ...entry }))));
  let cyclesBegun = 0;
  let siblings: readonly Block[] = blocks;
  let index = 0;

  const leave = () => {
    const left = frames.pop();
    if (left) [siblings, index] = [left.siblings, left.index + 1];
  };
  const isOutermostRepeat = (frame: WalkFrame) =>
    frame.block.kind === "repeat" && frames.every((other) => other === frame || other.block.kind !== "repeat");
  const begin = (frame: WalkFrame, stage?: PathEntry["stage"]) => {
    if (!isContainer(frame.block)) return;
    if (stage) frame.entry.stage = stage;
    if (stage !== "measure") {
      frame.begunHere = true;
      frame.counted = isOutermostRepeat(frame);
      if (frame.counted) cyclesBegun++;
    }
    [siblings, index] = [held(frame.block, stage), 0];
  };

  if (how === "into") {
    const last = frames.at(-1);
    if (last && isContainer(last.block)) {
      last.begunHere = true;
      [siblings, index] = [held(last.block, last.entry.stage), 0];
    }
  } else if (frames.length > 0) {
    const check = frames.at(-2);
    const isCheck = check?.block.kind === "untilClean" && check.entry.stage === "measure";
    leave();
    if (isCheck) {
      const verdict = judgeTurn(frames[frames.length - 1], context);
      if (verdict.then === "leave") leave();
      else if (verdict.then === "again") begin(frames[frames.length - 1], "blocks");
      else return { to: verdict.then, block: verdict.block };
    }
  }

  for (;;) {
    const block = siblings[index];
    if (block && !isContainer(block)) {
      const inRepeat = frames.some((frame) => frame.block.kind === "repeat");
      const entries = frames.map(({ entry }) => entry);
      return { to: "block", path: [...entries, { id: block.id }], cyclesBegun, inRepeat };
    }
    if (block) {
      const frame: WalkFrame = { siblings, index, block, entry: { id: block.id, turn: 0 } };
      if (block.kind === "repeat" && !mayBegin(block, 0, context)) index++;
      else {
        frames.push(frame);
        begin(frame, block.kind === "untilClean" ? "blocks" : undefined);
      }
      continue;
    }

    const parent = frames.at(-1);
    if (!parent) return { to: "end", cyclesBegun };
    if (parent.block.kind === "untilClean") begin(parent, "measure");
    else if (parent.begunHere) {
      if (parent.counted) cyclesBegun--;
      leave();
    } else if (hasAnotherTurn(parent, context)) {
      parent.entry.turn = turnOf(parent) + 1;
      begin(parent);
    } else leave();
  }
}

function judgeTurn(
  frame: WalkFrame,
  context: WalkContext,
): { then: "leave" } | { then: "again" } | { then: "hold" | "stop"; block: UntilCleanBlock } {
  const { block, entry } = frame;
  if (block.kind !== "untilClean" || entry.passed || context.isClean(block)) return { then: "leave" };
  if (turnOf(frame) + 1 < block.maxTimes) {
    entry.turn = turnOf(frame) + 1;
    return { then: "again" };
  }
  return block.otherwise === "continue" ? { then: "leave" } : { then: block.otherwise, block };
}

function hasAnotherTurn(frame: WalkFrame, context: WalkContext): boolean {
  const turn = turnOf(frame) + 1;
  if (frame.block.kind === "repeat") return mayBegin(frame.block, turn, context);
  if (frame.block.kind !== "forEach") return false;
  const { over } = frame.block;
  return turn < ("slots" in over ? over.slots : over.temperaturesC).length;
}

function mayBegin({ times, until }: RepeatBlock, turn: number, { nowMs, timeZone }: WalkContext): boolean {
  return until === undefined ? turn < (times ?? 0) : nowMs < endOfLocalDate(until, timeZone);
}

function turnOf({ entry }: WalkFrame): number {
  return entry.turn ?? 0;
}

function existing(frames: Frame[] | undefined): Frame[] {
  if (!frames) throw new RangeError("the cursor stands on a block that this version of the protocol does not have");
  return frames;
}
