/** Pieces that many schemas share. */
import { z } from "zod";

/** An id as this database makes them. Whatever has another shape cannot exist. */
export const id = z.string().regex(/^[1-9]\d{0,17}$/, "is not an id of this laboratory");

export const idParams = z.object({ id });

/** RFC 3339 with an offset; kept in UTC. */
export const instant = z.iso.datetime({ offset: true }).transform((value) => new Date(value)).pipe(z.date());

/** A time in an answer. */
export const time = z.iso.datetime();

/** Text that a person typed, without the blanks around it. */
export const words = (max: number) => z.string().trim().min(1, "is empty").max(max, `is longer than ${max} characters`);

const limit = z.coerce.number().int().min(1).max(200).default(50);

export const listQuery = z.object({ limit, cursor: z.string().max(500).optional() });

export const pageOf = <Item extends z.ZodType>(item: Item) => z.object({ items: z.array(item), nextCursor: z.string().nullable() });

export const created = z.object({ id: z.string() });
