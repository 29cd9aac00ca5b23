import { z } from "zod";
import { audit } from "@/lib/audit/record";
import type { NoteAnswer } from "@/lib/campaigns/notes-schema";
import { inTransaction, row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { CampaignNote } from "@/models/campaign-note";

/** A person's remark on a campaign; it stays as it was written. @throws AppError 403, 404. */
export function writeNote({ by, campaignId, text, now }: { by: Actor; campaignId: string; text: string; now: Date }): Promise<NoteAnswer> {
  demand(by, "write notes");
  return inTransaction(async (transaction) => {
    const campaign = await row(`select id from campaign where id = $1 for key share`, [campaignId], transaction);
    if (!campaign) throw notFound("campaign");
    const note = await CampaignNote.create({ campaignId, personId: by.id, text, at: now }, { transaction });
    await audit(transaction, { by, now, action: "write note", entity: "campaign", entityId: campaignId, detail: { noteId: note.id } });
    await notify(`changed:campaign:${campaignId}`, transaction);
    return { id: note.id, text, by: by.name, role: by.role, at: now.toISOString() };
  });
}

/** Remarks on a campaign, the newest first. @throws AppError 404 when there is no such campaign. */
export async function findNotes({ campaignId, query }: { campaignId: string; query: PageQuery }): Promise<Page<NoteAnswer>> {
  if (!(await row(`select id from campaign where id = $1`, [campaignId]))) throw notFound("campaign");
  const before = readCursor(query.cursor, z.tuple([idSchema]))?.[0] ?? null;
  const found = await rows<Omit<NoteAnswer, "at"> & { at: Date }>(
    `select n.id, n.text, p.name as by, p.role, n.at from campaign_note n join person p on p.id = n.person_id
      where n.campaign_id = $1 and ($2::bigint is null or n.id < $2) order by n.id desc limit $3`,
    [campaignId, before, query.limit + 1],
  );
  const { items, nextCursor } = cutPage(found, query.limit, ({ id }) => [id]);
  return { items: items.map(({ at, ...note }) => ({ ...note, at: at.toISOString() })), nextCursor };
}
