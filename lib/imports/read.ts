import { z } from "zod";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";
import type { ImportRunAnswer } from "@/lib/imports/schema";

type RunRow = Omit<ImportRunAnswer, "sizeBytes" | "readBytes" | "createdAt" | "startedAt" | "endedAt" | "now"> & {
  sizeBytes: string;
  readBytes: string;
  createdAt: Date;
  startedAt: Date | null;
  endedAt: Date | null;
};

const RUNS = `
  select r.id, r.name, r.file_name as "fileName", r.size_bytes as "sizeBytes", r.state, r.reserved_campaign_id as "campaignId", r.read_bytes as "readBytes",
         r.rows_read as "rowsRead", r.rows_stored as "rowsStored", r.phases, r.problem, p.name as by, r.created_at as "createdAt", r.started_at as "startedAt",
         r.ended_at as "endedAt", r.cancel_wanted as "cancelWanted"
    from import_run r join person p on p.id = r.created_by where r.state <> 'receiving'`;

/** An import with how far it is. @throws AppError 404 */
export async function getImport({ importRunId, now }: { importRunId: string; now: Date }): Promise<ImportRunAnswer> {
  const run = await row<RunRow>(`${RUNS} and r.id = $1`, [importRunId]);
  if (!run) throw notFound("import");
  return present(run, now);
}

/** Imports, the newest first. */
export async function findImports({ query, now }: { query: PageQuery; now: Date }): Promise<Page<ImportRunAnswer>> {
  const before = readCursor(query.cursor, z.tuple([idSchema]))?.[0] ?? null;
  const found = await rows<RunRow>(`${RUNS} and ($1::bigint is null or r.id < $1) order by r.id desc limit $2`, [before, query.limit + 1]);
  const { items, nextCursor } = cutPage(found, query.limit, ({ id }) => [id]);
  return { items: items.map((run) => present(run, now)), nextCursor };
}

const present = ({ sizeBytes, readBytes, createdAt, startedAt, endedAt, ...run }: RunRow, now: Date): ImportRunAnswer => ({
  ...run,
  sizeBytes: Number(sizeBytes),
  readBytes: Number(readBytes),
  createdAt: createdAt.toISOString(),
  startedAt: startedAt?.toISOString() ?? null,
  endedAt: endedAt?.toISOString() ?? null,
  now: now.toISOString(),
});
