import { z } from "zod";
import { rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import { cutPage, readCursor, type PageQuery } from "@/lib/http/paging";
import { idSchema } from "@/lib/http/ids";

/** The log of a campaign, the newest first. @throws AppError 404 when there is no such campaign. */
export async function findEvents({ campaignId, query }: { campaignId: string; query: PageQuery }) {
  const before = readCursor(query.cursor, z.tuple([idSchema]))?.[0] ?? null;
  const found = await rows<{ id: string; at: Date; clock: Date | null; kind: string; who: string; text: string; sequence: number | null }>(
    `select id, at, clock, kind, who, text, sequence from campaign_event
      where campaign_id = $1 and ($2::bigint is null or id < $2) order by id desc limit $3`,
    [campaignId, before, query.limit + 1],
  );
  if (found.length === 0) await demandExists("campaign", campaignId);
  const { items, nextCursor } = cutPage(found, query.limit, ({ id }) => [id]);
  return { items: items.map(({ at, clock, ...event }) => ({ ...event, at: at.toISOString(), clock: clock?.toISOString() ?? null })), nextCursor };
}
