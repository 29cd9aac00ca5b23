import { invalid } from "@/lib/errors";

/** Where the next page begins: the sort key of the last item shown. Opaque to callers. */
export const encodeCursor = (key: readonly string[]): string => Buffer.from(JSON.stringify(key)).toString("base64url");

/** @throws AppError 400 when the text is no cursor with as many parts. */
export function decodeCursor(cursor: string, parts: number): string[] {
  try {
    const key: unknown = JSON.parse(Buffer.from(cursor, "base64url").toString());
    if (Array.isArray(key) && key.length === parts && key.every((part) => typeof part === "string")) return key as string[];
  } catch {
    // falls through to the same answer
  }
  throw invalid([{ path: "cursor", message: "is not a cursor of this list; begin again without it" }]);
}

export type Page<Item> = { items: Item[]; nextCursor: string | null };

/** One page from up to limit + 1 rows: the row too many only tells that there are more. */
export function toPage<Row, Item>(found: readonly Row[], limit: number, keyOf: (row: Row) => readonly string[], present: (row: Row) => Item): Page<Item> {
  const shown = found.slice(0, limit);
  const last = shown.at(-1);
  return { items: shown.map(present), nextCursor: found.length > limit && last ? encodeCursor(keyOf(last)) : null };
}
