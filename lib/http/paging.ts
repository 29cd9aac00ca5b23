import { z } from "zod";
import { invalid } from "@/lib/errors";
import { refuseBadText } from "@/lib/http/read-body";

/** `?limit=` and `?cursor=` of every list; extend it with a list's own filters. */
export const pageQuery = z.object({
  limit: z.coerce.number("must be a number").int().min(1).max(200).default(50),
  cursor: z.string().max(400).optional(),
});

export type PageQuery = z.output<typeof pageQuery>;

export type Page<T> = { items: T[]; nextCursor: string | null };

export const pageOf = <T extends z.ZodType>(item: T) => z.object({ items: z.array(item), nextCursor: z.string().nullable() });

/**
 * Cuts one page out of up to `limit + 1` rows that a query found. `keyOf` names the row by what the list is ordered by, so
 * that the next page begins behind it whatever was added or changed since.
 */
export function cutPage<T>(found: readonly T[], limit: number, keyOf: (row: T) => readonly (string | number | null)[]): Page<T> {
  const items = found.slice(0, limit);
  const last = items.at(-1);
  const more = found.length > limit && last !== undefined;
  return { items, nextCursor: more ? Buffer.from(JSON.stringify(keyOf(last))).toString("base64url") : null };
}

/** The key inside a cursor, undefined on the first page. @throws AppError 400 for a cursor that is not one of ours. */
export function readCursor<K>(cursor: string | undefined, key: z.ZodType<K>): K | undefined {
  if (cursor === undefined) return undefined;
  try {
    const parts: unknown = JSON.parse(Buffer.from(cursor, "base64url").toString("utf8"));
    refuseBadText(parts);
    return key.parse(parts);
  } catch {
    throw invalid([{ path: "cursor", message: "is not one that this list gave out" }]);
  }
}
