import { z } from "zod";
import { rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import type { ExclusionItem } from "@/lib/exclusions/schema";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";

/** What people left out of a campaign, and what they took back in, the newest first. @throws AppError 404. */
export async function findExclusions({ campaignId, query }: { campaignId: string; query: PageQuery }): Promise<Page<ExclusionItem>> {
  const before = readCursor(query.cursor, z.tuple([idSchema]))?.[0] ?? null;
  const found = await rows<Omit<ExclusionItem, "at" | "takenBackAt"> & { at: Date; takenBackAt: Date | null }>(
    `select e.id, p.id as "phaseId", p.sequence, p.cycle, p.medium, e.idx as index, person.name as by, e.at, e.why, undoer.name as "takenBackBy", e.undone_at as "takenBackAt"
       from phase p join exclusion e on e.step_id = p.step_id join person on person.id = e.person_id left join person undoer on undoer.id = e.undone_by
      where p.campaign_id = $1 and ($2::bigint is null or e.id < $2) order by e.id desc limit $3`,
    [campaignId, before, query.limit + 1],
  );
  if (found.length === 0) await demandExists("campaign", campaignId);
  const { items, nextCursor } = cutPage(found, query.limit, ({ id }) => [id]);
  return { items: items.map(({ at, takenBackAt, ...rest }) => ({ ...rest, at: at.toISOString(), takenBackAt: takenBackAt?.toISOString() ?? null })), nextCursor };
}
