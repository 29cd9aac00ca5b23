import { book } from "./cell";
import { isClean, notCleanText } from "./clean";
import { cellState, detourBlocks, prepareDetour, referenceDetour } from "./detours";
import { stepLabel } from "./labels";
import { makeStep } from "./make-step";
import { framesOf, leafAt } from "./path";
import { applyRedirection, endMain, pendingAtEnd, takeWalk } from "./redirect";
import type { Block, Definition, LeafBlock, MeasureBlock, UntilCleanBlock } from "./schema";
import { followsTrack } from "./sweep-params";
import { type Action, type Cursor, type Detour, type Facts, type Next, type PathEntry, trackKey } from "./types";
import { walk, type Walked } from "./walk";

/**
 * The next thing to do. Called when the step the cursor stands on has ended (`facts.last`), before the first, and after
 * each `redirect`. Pure; asked again with the same arguments it answers the same. Cost: the depth and the siblings passed.
 *
 * @throws RangeError if the step has not ended and nothing sends the cursor elsewhere, or the cursor stands on a block that
 *   the definition does not have.
 */
export function next(definition: Definition, cursor: Cursor, facts: Facts): Next {
  if (cursor.finished) return { cursor, action: { do: "finish" } };
  if (isParked(cursor) && !cursor.redirection) return { cursor, action: { do: "parked" } };
  const draft = draftOf(cursor);
  if (!isParked(draft) || !draft.parked?.begun) bookLast(definition, draft, facts);
  applyRedirection(definition, draft, facts);
  if (isParked(draft)) return { cursor: draft, action: { do: "parked" } };

  const action = judgeLast(definition, draft, facts) ?? goOn(definition, draft, facts);
  if (action.do === "step") delete draft.held;
  return { cursor: draft, action };
}

/** A copy in which everything may be changed that `next` changes in place; much faster than a structured clone. */
function draftOf(cursor: Cursor): Cursor {
  const copied = (path: PathEntry[]) => path.map((entry) => ({ ...entry }));
  return {
    ...cursor,
    path: copied(cursor.path),
    detours: cursor.detours.map((detour) => ({ ...detour, path: copied(detour.path) })),
    cleanedAgain: { ...cursor.cleanedAgain },
    ...(cursor.parked && { parked: { ...cursor.parked } }),
  };
}

function isParked({ parked, detours }: Cursor): boolean {
  return parked !== undefined && detours.at(-1)?.kind !== "park";
}

type Line = { blocks: readonly Block[]; path: PathEntry[]; detour?: Detour };

function presentLine(definition: Definition, draft: Cursor): Line {
  const detour = draft.detours.at(-1);
  return detour
    ? { blocks: detourBlocks(definition, detour), path: detour.path, detour }
    : { blocks: definition.blocks, path: draft.path };
}

/** The block that a line stands on, and its entry. */
function standing({ blocks, path }: Line): { block: LeafBlock; leaf: PathEntry } | undefined {
  const leaf = path.at(-1);
  if (!leaf) return undefined;
  const block = leafAt(framesOf(blocks, path) ?? []);
  if (!block) throw new RangeError("the cursor stands on a block that this version of the protocol does not have");
  return { block, leaf };
}

function bookLast(definition: Definition, draft: Cursor, facts: Facts): void {
  const at = standing(presentLine(definition, draft));
  if (!at || at.leaf.pending || at.leaf.booked) return;
  if (!facts.last && !draft.redirection) throw new RangeError("the step that the cursor stands on has not ended");
  book(draft, at.block, facts.last?.outcome ?? "open", facts.nowMs);
  if (facts.last && facts.last.outcome !== "failed") at.leaf.booked = true;
}

/** What the end of the last step says: a hold, a search, the same measurement once more, or (undefined) nothing. */
function judgeLast(definition: Definition, draft: Cursor, facts: Facts): Action | undefined {
  const at = standing(presentLine(definition, draft));
  if (!at || at.leaf.pending) return undefined;
  const { block, leaf } = at;
  if (facts.last?.outcome === "failed") return { do: "hold", reason: "failure", text: `${stepLabel(block)} failed.` };
  if (block.kind !== "measure" || facts.last?.outcome !== "done") return undefined;

  if (leaf.find) {
    delete leaf.find;
    if (followsTrack(block.sweep) && !facts.tracks[trackKey(block.medium, draft.setPointC)]) {
      leaf.find = true;
      return fail(draft, `No resonance was found in ${block.medium}.`);
    }
    redo(leaf);
    return undefined;
  }
  if (isUnusable(block, facts)) {
    if (leaf.attempt) return fail(draft, `${stepLabel(block)}: more than half the fits were unusable, twice.`);
    leaf.find = true;
    leaf.attempt = 2;
    redo(leaf);
    return undefined;
  }
  keepLimits(draft, block);
  return undefined;
}

function isUnusable(block: MeasureBlock, { last }: Facts): boolean {
  return block.sweep.centre === "track" && last?.phase !== undefined && last.phase.unusable > last.phase.n / 2;
}

function redo(leaf: PathEntry): void {
  leaf.pending = true;
  delete leaf.booked;
}

/** A limit that did not ask again at a phase in the medium where it was broken has been kept. */
function keepLimits(draft: Cursor, { medium }: MeasureBlock): void {
  const isDue = (limitId: string) => draft.due?.some((due) => due.limitId === limitId);
  const still = Object.entries(draft.cleanedAgain).filter(([limitId, cleaned]) => cleaned.medium !== medium || isDue(limitId));
  draft.cleanedAgain = Object.fromEntries(still);
}

function goOn(definition: Definition, draft: Cursor, facts: Facts): Action {
  for (;;) {
    const line = presentLine(definition, draft);
    if (line.detour && prepareDetour(definition, draft, line.detour)) continue;
    if (line.path.at(-1)?.pending) return make(definition, draft, facts, line);
    const action = line.detour ? moveDetour(definition, draft, facts, line.detour) : moveMain(definition, draft, facts);
    if (action) return action;
  }
}

function make(definition: Definition, draft: Cursor, facts: Facts, line: Line): Action {
  const at = standing(line);
  if (!at) throw new RangeError("there is no block to make");
  const { block, leaf } = at;
  const { detour } = line;
  const kind = detour?.limitIds ? "cleanAgain" : detour?.kind;
  const step = makeStep({ definition, draft, facts, block, leaf, cycle: detour?.cycle ?? draft.cycle, detour: kind });
  if (!step) return fail(draft, `${stepLabel(block)}: the sweep lies outside the rig's range.`);

  delete leaf.pending;
  draft.sequence = step.sequence;
  if (detour?.kind === "park" && draft.parked) draft.parked.begun = true;
  if (step.kind === "measure" && step.role === "reference" && draft.reference?.setPointC !== draft.setPointC)
    draft.reference = { measureId: block.id, medium: step.medium, setPointC: draft.setPointC };
  return { do: "step", step };
}

function moveDetour(definition: Definition, draft: Cursor, facts: Facts, detour: Detour): Action | undefined {
  const boundary = detour.kind === "reference" ? boundaryAt(draft, presentLine(definition, draft)) : undefined;
  const walked = holdIfTooOften(draft, boundary) ?? walk(detourBlocks(definition, detour), detour.path, "after", contextOf(facts));
  if ("do" in walked) return walked;
  if (walked.to === "hold" || walked.to === "stop") return giveUp(draft, walked, facts);
  if (walked.to === "block") {
    detour.path = pendingAtEnd(walked.path);
    return undefined;
  }
  draft.detours.pop();
  if (boundary) cleanAgain(definition, draft, boundary, detour.cycle);
  return detour.kind === "park" ? { do: "parked" } : undefined;
}

function moveMain(definition: Definition, draft: Cursor, facts: Facts): Action | undefined {
  if (draft.ended) {
    draft.finished = true;
    return { do: "finish" };
  }
  const { cycle } = draft;
  const wanted = cellState(draft);
  const boundary = boundaryAt(draft, presentLine(definition, draft));
  const walked = holdIfTooOften(draft, boundary) ?? walk(definition.blocks, draft.path, "after", contextOf(facts));
  if ("do" in walked) return walked;
  if (walked.to === "hold" || walked.to === "stop") return giveUp(draft, walked, facts);
  if (walked.to === "block") takeWalk(draft, walked);
  else endMain(draft);
  if (boundary) {
    draft.detours.push({ kind: "restore", path: [], cycle, wanted });
    cleanAgain(definition, draft, boundary, cycle);
  }
  return undefined;
}

/** The phase just closed, where a limit waits for it to clean again. */
function boundaryAt(draft: Cursor, line: Line): MeasureBlock | undefined {
  const at = draft.due && standing(line);
  return at?.block.kind === "measure" ? at.block : undefined;
}

function holdIfTooOften(draft: Cursor, boundary: MeasureBlock | undefined): Action | undefined {
  const tooOften = boundary && draft.due?.find(({ limitId, maxTimes }) => timesCleaned(draft, limitId) >= maxTimes);
  if (!tooOften) return undefined;
  draft.held = "cleanAgain";
  const times = tooOften.maxTimes === 1 ? "once" : `${tooOften.maxTimes} times`;
  return { do: "hold", reason: "limit", text: `Cleaning again ${times} did not bring it back within the limit.` };
}

/** Puts the cleaning, and under it the reference again, before whatever is next. */
function cleanAgain(definition: Definition, draft: Cursor, boundary: MeasureBlock, cycle: number): void {
  const limitIds = (draft.due ?? []).map(({ limitId }) => limitId);
  delete draft.due;
  for (const limitId of limitIds)
    draft.cleanedAgain[limitId] = { times: timesCleaned(draft, limitId) + 1, medium: boundary.medium };

  const reference: Detour | undefined =
    boundary.role === "reference"
      ? { kind: "reference", path: [], cycle, measureId: boundary.id, medium: boundary.medium, limitIds }
      : referenceDetour(definition, draft, limitIds);
  if (reference) draft.detours.push({ ...reference, cycle });
  draft.detours.push({ kind: "cleanAgain", path: [], cycle, limitIds });
}

function timesCleaned({ cleanedAgain }: Cursor, limitId: string): number {
  return Object.hasOwn(cleanedAgain, limitId) ? cleanedAgain[limitId].times : 0;
}

function contextOf(facts: Facts) {
  const { nowMs, timeZone, last, baseline } = facts;
  return { nowMs, timeZone, isClean: (block: UntilCleanBlock) => isClean(block, last?.phase, baseline) };
}

function giveUp(draft: Cursor, { to, block }: Extract<Walked, { block: UntilCleanBlock }>, facts: Facts): Action {
  const text = notCleanText(block, facts.last?.phase, facts.baseline);
  if (to === "stop") return { do: "stop", text };
  draft.held = "untilClean";
  return { do: "hold", reason: "limit", text };
}

function fail(draft: Cursor, text: string): Action {
  draft.held = "failure";
  return { do: "hold", reason: "failure", text };
}
