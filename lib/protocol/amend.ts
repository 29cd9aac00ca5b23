import { detourBlocks } from "./detours";
import { framesOf, type Frame } from "./path";
import type { Block, Definition } from "./schema";
import type { Cursor, Detour, PathEntry } from "./types";

/**
 * Takes a held campaign's cursor to another version of its protocol. Possible if every id on the cursor's path, and on
 * those of detours under way, still stands at the same place of the nesting, with the turns still there to be gone on with.
 * The counters stay as they are: a repeat that has become shorter ends with its present turn.
 */
export function amend(from: Definition, to: Definition, cursor: Cursor): { cursor: Cursor } | { impossible: string } {
  const main = whyNot({ before: from.blocks, after: to.blocks, path: cursor.path });
  if (main) return { impossible: main };
  for (const detour of cursor.detours) {
    const reason = whyNotDetour(from, to, detour);
    if (reason) return { impossible: reason };
  }
  const limits = new Set(to.limits.map(({ id }) => id));
  const cleanedAgain = Object.fromEntries(Object.entries(cursor.cleanedAgain).filter(([limitId]) => limits.has(limitId)));
  const amended: Cursor = { ...cursor, cleanedAgain };
  const due = to.cleaning?.length ? (cursor.due ?? []).filter(({ limitId }) => limits.has(limitId)) : [];
  if (due.length > 0) amended.due = due;
  else delete amended.due;
  return { cursor: amended };
}

function whyNotDetour(from: Definition, to: Definition, detour: Detour): string | undefined {
  if (detour.kind === "reference" && detourBlocks(to, detour).length === 0)
    return `The reference to be measured (${detour.measureId}) is not in that version.`;
  return whyNot({ before: detourBlocks(from, detour), after: detourBlocks(to, detour), path: detour.path });
}

function whyNot({ before, after, path }: { before: readonly Block[]; after: readonly Block[]; path: PathEntry[] }) {
  const frames = framesOf(after, path);
  if (!frames) {
    const missing = path.find((_, index) => !framesOf(after, path.slice(0, index + 1)));
    return `The block ${missing?.id} is not in that version at the place where the campaign stands.`;
  }
  const old = framesOf(before, path);
  const changed = frames.findIndex(({ block }, index) => old?.[index].block.kind !== block.kind);
  if (changed >= 0) return `The block ${frames[changed].block.id} is of another kind in that version.`;
  const short = frames.find(isPastItsList);
  return short && `The list of ${short.block.id} is too short in that version for where the campaign stands.`;
}

function isPastItsList({ block, entry }: Frame): boolean {
  if (block.kind !== "forEach") return false;
  return (entry.turn ?? 0) >= ("slots" in block.over ? block.over.slots : block.over.temperaturesC).length;
}
