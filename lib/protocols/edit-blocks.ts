import { type Draft, type DraftBlock, LISTS, type ListName, setAt } from "@/lib/protocols/draft";

/** Where a block stands: in which list, inside which container (null: at the top), and at which index there. */
export type Place = { list: ListName; inside: string | null; index: number };

/** The place of a block; undefined for one that is not there, and for the measurement of an `untilClean`, which has none of its own. */
export function placeOf(draft: Draft, id: string): Place | undefined {
  const search = (blocks: readonly DraftBlock[], list: ListName, inside: string | null): Place | undefined => {
    for (const [index, block] of blocks.entries()) {
      if (block.id === id) return { list, inside, index };
      const found = block.blocks && search(block.blocks, list, block.id);
      if (found) return found;
    }
    return undefined;
  };
  for (const list of LISTS) {
    const found = search(draft[list] ?? [], list, null);
    if (found) return found;
  }
  return undefined;
}

export function findBlock(draft: Draft, id: string): DraftBlock | undefined {
  const search = (blocks: readonly DraftBlock[]): DraftBlock | undefined => {
    for (const block of blocks) {
      if (block.id === id) return block;
      if (block.measure?.id === id) return block.measure;
      const found = block.blocks && search(block.blocks);
      if (found) return found;
    }
    return undefined;
  };
  for (const list of LISTS) {
    const found = search(draft[list] ?? []);
    if (found) return found;
  }
  return undefined;
}

/** The siblings at a place. */
export function blocksAt(draft: Draft, { list, inside }: Pick<Place, "list" | "inside">): readonly DraftBlock[] {
  return (inside === null ? draft[list] : findBlock(draft, inside)?.blocks) ?? [];
}

export function setInBlock(draft: Draft, id: string, path: string, value: unknown): Draft {
  const change = (blocks: readonly DraftBlock[]): readonly DraftBlock[] => mapChanged(blocks, (block) => {
    if (block.id === id) return setAt(block, path, value);
    if (block.measure?.id === id) return { ...block, measure: setAt(block.measure, path, value) };
    const blocksInside = block.blocks && change(block.blocks);
    return blocksInside === block.blocks ? block : { ...block, blocks: blocksInside };
  });
  return mapLists(draft, change);
}

export const insertBlock = (draft: Draft, place: Place, block: DraftBlock): Draft => setSiblings(draft, place, blocksAt(draft, place).toSpliced(place.index, 0, block));

export function removeBlock(draft: Draft, id: string): Draft {
  const place = placeOf(draft, id);
  return place ? setSiblings(draft, place, blocksAt(draft, place).toSpliced(place.index, 1)) : draft;
}

/**
 * Moves a block by one line, as the list is read: past a single step, into a container at its near end, and out of one at its
 * border. Its ids stay, also those inside. At the end of its list it stays where it is.
 */
export function moveBlock(draft: Draft, id: string, direction: "up" | "down"): Draft {
  const from = placeOf(draft, id);
  const block = findBlock(draft, id);
  const to = from && placeBeyond(draft, from, direction);
  return block && to ? insertBlock(removeBlock(draft, id), to, block) : draft;
}

/** The place in the draft without the block that moves. */
function placeBeyond(draft: Draft, from: Place, direction: "up" | "down"): Place | undefined {
  const siblings = blocksAt(draft, from);
  const neighbour = siblings[direction === "up" ? from.index - 1 : from.index + 1] as DraftBlock | undefined;
  if (neighbour?.blocks) return { list: from.list, inside: neighbour.id, index: direction === "up" ? neighbour.blocks.length : 0 };
  if (neighbour) return { ...from, index: direction === "up" ? from.index - 1 : from.index + 1 };
  const outer = from.inside === null ? undefined : placeOf(draft, from.inside);
  return outer && { ...outer, index: direction === "up" ? outer.index : outer.index + 1 };
}

function setSiblings(draft: Draft, { list, inside }: Place, siblings: readonly DraftBlock[]): Draft {
  if (inside !== null) return setInBlock(draft, inside, "blocks", siblings);
  return list === "blocks" || siblings.length > 0 ? { ...draft, [list]: siblings } : setAt(draft, list, undefined);
}

function mapLists(draft: Draft, change: (blocks: readonly DraftBlock[]) => readonly DraftBlock[]): Draft {
  let changed = draft;
  for (const list of LISTS) {
    const before = draft[list];
    const after = before && change(before);
    if (after !== before) changed = { ...changed, [list]: after };
  }
  return changed;
}

/** Keeps the array when nothing in it changed, so that rows of a long protocol are not drawn again. */
function mapChanged<T>(items: readonly T[], change: (item: T) => T): readonly T[] {
  const after = items.map(change);
  return after.some((item, index) => item !== items[index]) ? after : items;
}
