import { z } from "zod";
import type { CampaignSort } from "@/lib/campaigns/answers";
import { idSchema } from "@/lib/http/ids";

type Order = { by: string; type: "text" | "bigint" | "timestamptz"; descending?: boolean };

const START = "coalesce(c.started_clock, c.started_at, 'infinity'::timestamptz)";
const END = "coalesce(c.ended_clock, c.ended_at, 'infinity'::timestamptz)";
const REPEATS = "coalesce(done.repeats, 0)";

/** Highest priority first, then longest in line, as text that sorts so; what was set aside comes before what was never begun. */
const LINE = "lpad((100 - c.priority)::text, 4, '0') || coalesce(to_char(c.queued_at at time zone 'UTC', 'YYYYMMDDHH24MISSUS'), '~')";

const ORDERS: Record<CampaignSort, Order> = {
  newest: { by: "c.id", type: "bigint", descending: true },
  oldest: { by: "c.id", type: "bigint" },
  name: { by: "lower(c.name)", type: "text" },
  "-name": { by: "lower(c.name)", type: "text", descending: true },
  start: { by: START, type: "timestamptz" },
  "-start": { by: START, type: "timestamptz", descending: true },
  end: { by: END, type: "timestamptz" },
  "-end": { by: END, type: "timestamptz", descending: true },
  repeats: { by: REPEATS, type: "bigint" },
  "-repeats": { by: REPEATS, type: "bigint", descending: true },
  line: { by: LINE, type: "text" },
};

/** Numbers and times as PostgreSQL writes them in UTC. */
const KEYS: Record<Order["type"], z.ZodType<string>> = {
  text: z.string(),
  bigint: z.string().regex(/^\d{1,18}$/),
  timestamptz: z.string().refine((text) => text === "infinity" || (/\+00$/.test(text) && z.iso.datetime({ offset: true }).safeParse(`${text.replace(" ", "T")}:00`).success)),
};

/**
 * A list's order by a key and the id, in SQL. `key` is selected as text beside each row, so that a cursor can name the last
 * one, which `cursor` validates; `beyond` is true for rows behind the bound `($key, $id)`.
 */
export function orderOf(sort: CampaignSort, { key, id }: { key: string; id: string }) {
  const { by, type, descending } = ORDERS[sort];
  const direction = descending ? "desc" : "asc";
  return {
    key: `(${by})::text`,
    cursor: z.tuple([KEYS[type], idSchema]),
    beyond: `(${key}::text is null or (${by}, c.id) ${descending ? "<" : ">"} (${key}::text::${type}, ${id}::bigint))`,
    orderBy: `${by} ${direction}, c.id ${direction}`,
  };
}
