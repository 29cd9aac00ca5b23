import { rows } from "@/lib/db";
import type { ContactsAnswer } from "@/lib/rigs/schema";

const CELL_S = 600;
const CELLS = 144;

/** How often each rig's agent was heard in the last 24 hours, counted in ten-minute cells. */
export async function findContacts({ now }: { now: Date }): Promise<ContactsAnswer> {
  const found = await rows<{ rigId: string; cells: Record<string, number>; longestSilenceS: number | null }>(
    `with heard as (
       select rig_id, at, extract(epoch from at - lag(at) over (partition by rig_id order by at)) as silence_s,
              ${CELLS - 1} - floor(extract(epoch from $1::timestamptz - at) / ${CELL_S})::int as cell
         from heartbeat where at > $1::timestamptz - interval '1 day' and at <= $1),
     counted as (select rig_id, cell, count(*)::int as n, max(silence_s) as silence_s from heard group by rig_id, cell)
     select rig_id as "rigId", jsonb_object_agg(cell, n) as cells, max(silence_s)::float8 as "longestSilenceS"
       from counted group by rig_id order by rig_id`,
    [now],
  );
  return {
    items: found.map(({ rigId, cells, longestSilenceS }) => ({
      rigId,
      counts: Array.from({ length: CELLS }, (_, cell) => cells[cell] ?? 0),
      longestSilenceS,
    })),
    cellS: CELL_S,
    to: now.toISOString(),
  };
}
