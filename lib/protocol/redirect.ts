import { cellState, referenceDetour } from "./detours";
import { framesOf, leafAt } from "./path";
import type { Definition, LeafBlock } from "./schema";
import type { CellState, Cursor, Facts, Redirection } from "./types";
import { walk } from "./walk";

/**
 * Takes note of where a cursor is to go; the following `next` carries it out, since that knows how the present step ended.
 * A new redirection takes the place of one not carried out yet, but going on keeps the reference that a new mount is owed;
 * `cleanAgain` waits beside it for its phase boundary.
 */
export function redirect(definition: Definition, cursor: Cursor, redirection: Redirection): Cursor | { impossible: string } {
  if (cursor.finished) return { impossible: "The campaign has finished." };
  if (redirection.kind === "cleanAgain") {
    if (!definition.cleaning?.length) return { impossible: "The protocol does not say how to clean." };
    const { limitId, maxTimes } = redirection;
    const others = (cursor.due ?? []).filter((due) => due.limitId !== limitId);
    return { ...cursor, due: [...others, { limitId, maxTimes }] };
  }
  if (redirection.kind === "resume" && redirection.from === "here" && cursor.parked?.begun)
    return { impossible: "The cell has been parked since; go on from the phase or the cycle." };
  if (redirection.kind !== "park" && redirection.from === "cycle" && outermostRepeat(definition, cursor) < 0)
    return { impossible: "The campaign is not in a cycle; go on from the phase." };
  if (redirection.kind === "resume" && cursor.redirection?.kind === "reference")
    return { ...cursor, redirection: { kind: "reference", from: redirection.from === "cycle" ? "cycle" : "phase" } };
  return { ...cursor, redirection };
}

/** Carries out what `redirect` took note of. */
export function applyRedirection(definition: Definition, draft: Cursor, facts: Facts): void {
  const { redirection } = draft;
  delete draft.redirection;
  if (!redirection) return;
  if (redirection.kind === "park") return park(definition, draft, facts);

  const parked = draft.parked;
  delete draft.parked;
  draft.detours = draft.detours.filter(({ kind }) => kind !== "park");
  if (draft.held === "cleanAgain") forgive(draft);
  if (redirection.kind === "resume" && redirection.from === "here") goOnHere(draft, facts, parked);
  else if (redirection.from === "cycle") fromCycle(definition, draft, facts);
  else fromPhase(definition, draft, facts, parked);
  delete draft.held;
  if (redirection.kind === "reference") referenceFirst(definition, draft, facts);
}

/** What has been done is left behind first, so that coming back restores it once instead of doing it twice; only phases are begun anew. */
function park(definition: Definition, draft: Cursor, facts: Facts): void {
  const { cycle } = draft;
  draft.detours = draft.detours.filter(({ kind }) => kind !== "park");
  if (!draft.parked) {
    if (draft.detours.length === 0 && facts.last?.outcome === "done" && mainKind(definition, draft) !== "measure")
      standBeforeNext(definition, draft, facts);
    draft.parked = { ...cellState(draft), begun: false };
  }
  if (draft.cell.content !== "air" && definition.park?.length) draft.detours.push({ kind: "park", path: [], cycle });
}

function mainKind(definition: Definition, { path }: Cursor): LeafBlock["kind"] | undefined {
  return leafAt(framesOf(definition.blocks, path) ?? [])?.kind;
}

/** A person let the limit pass: its cleaning is no longer due and counts from nought. */
function forgive(draft: Cursor): void {
  for (const { limitId } of draft.due ?? []) delete draft.cleanedAgain[limitId];
  delete draft.due;
}

/** A step given up for a parking that found nothing to do is made again, as a failed one is. */
function goOnHere(draft: Cursor, { last }: Facts, parked: Cursor["parked"]): void {
  const path = draft.detours.at(-1)?.path ?? draft.path;
  const isLost = last?.outcome === "failed" || (parked && last?.outcome === "skipped");
  if (draft.held === "failure" || isLost) redoLast(path);
  const check = path.at(-2);
  if (draft.held === "untilClean" && check) check.passed = true;
}

function fromCycle(definition: Definition, draft: Cursor, facts: Facts): void {
  const depth = outermostRepeat(definition, draft);
  const walked = walk(definition.blocks, draft.path.slice(0, depth + 1), "into", { ...facts, isClean: () => true });
  draft.detours = [];
  const wanted = draft.cycleStart;
  if (walked.to === "block") takeWalk(draft, walked);
  else endMain(draft);
  if (wanted) restore(draft, wanted);
}

/** The phase begins anew; where a detour was under way it does, from its own beginning, and the phase after it. */
function fromPhase(definition: Definition, draft: Cursor, { last }: Facts, parked: Cursor["parked"]): void {
  draft.detours = draft.detours
    .filter(({ kind, wanted }) => kind !== "restore" || wanted)
    .map(({ blocks: _made, ...detour }) => ({ ...detour, path: [] }));
  if (draft.detours.length > 0) return;
  const kind = mainKind(definition, draft);
  const isLost = last !== undefined && last.outcome !== "done";
  if (kind === "measure" || parked?.begun || draft.held === "failure" || isLost) redoLast(draft.path);
  if (parked?.begun) restore(draft, parked);
  else if (kind === "fill" && isLost) restore(draft, { cell: { content: "air" }, settled: draft.settled ?? null });
}

function referenceFirst(definition: Definition, draft: Cursor, facts: Facts): void {
  const reference = referenceDetour(definition, draft);
  if (draft.sequence === 0 || !reference) return;
  if (draft.detours.length === 0) {
    standBeforeNext(definition, draft, facts);
    restore(draft, cellState(draft));
  }
  draft.detours.push(reference);
}

/** Makes the main line stand on a block still to be made, so that it can be left and come back to. */
function standBeforeNext(definition: Definition, draft: Cursor, facts: Facts): void {
  if (draft.ended || draft.path.length === 0 || draft.path.at(-1)?.pending) return;
  if (facts.last?.outcome !== "done") return redoLast(draft.path);
  const walked = walk(definition.blocks, draft.path, "after", { ...facts, isClean: () => true });
  if (walked.to === "block") takeWalk(draft, walked);
  else endMain(draft);
}

/** Moves the main line to where a walk led, and counts the cycles begun on the way. */
export function takeWalk(draft: Cursor, walked: Extract<ReturnType<typeof walk>, { to: "block" }>): void {
  draft.path = pendingAtEnd(walked.path);
  draft.cyclesBegun += walked.cyclesBegun;
  if (!walked.inRepeat) draft.cycle = 0;
  else if (walked.cyclesBegun > 0) {
    draft.cycle = draft.cyclesBegun;
    draft.cycleStart = cellState(draft);
  }
}

export function endMain(draft: Cursor): void {
  draft.ended = true;
  draft.path = [];
}

export function pendingAtEnd(path: Cursor["path"]): Cursor["path"] {
  return path.map((entry, index) => (index === path.length - 1 ? { ...entry, pending: true } : entry));
}

function redoLast(path: Cursor["path"]): void {
  const last = path.pop();
  if (last) path.push({ id: last.id, pending: true });
}

function restore(draft: Cursor, wanted: CellState): void {
  const { cell, settled } = wanted;
  draft.detours.push({ kind: "restore", path: [], cycle: draft.cycle, wanted: { cell, settled } });
}

function outermostRepeat(definition: Definition, { path }: Cursor): number {
  return (framesOf(definition.blocks, path) ?? []).findIndex(({ block }) => block.kind === "repeat");
}
