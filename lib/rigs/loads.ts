import { z } from "zod";
import { row, rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import type { LoadAnswer } from "@/lib/rigs/schema";

type LoadQuery = { rigId: string; limit: number; cursor?: string };
type LoadRow = Omit<LoadAnswer, "loadedAt"> & { loadedAt: Date };

const SELECT = `
  select l.id, l.rig_id as "rigId", l.port, l.how, l.volume_ml as "volumeMl", lot.id as "lotId", lot.code as "lotCode",
         q.id as "liquidId", q.name as "liquidName", p.name as "loadedBy", l.loaded_at as "loadedAt"
    from load l join lot on lot.id = l.lot_id join liquid q on q.id = lot.liquid_id left join person p on p.id = l.loaded_by`;

/** @throws AppError 404 when there is none. */
export async function getLoad(loadId: string): Promise<LoadAnswer> {
  const found = await row<LoadRow>(`${SELECT} where l.id = $1`, [loadId]);
  if (!found) throw notFound("load");
  return present(found);
}

/** What was put on a rig's ports, newest first. @throws AppError 404 when there is no such rig. */
export async function findLoads({ rigId, limit, cursor }: LoadQuery): Promise<Page<LoadAnswer>> {
  const [id] = readCursor(cursor, z.tuple([idSchema])) ?? [null];
  const found = await rows<LoadRow>(
    `${SELECT} where l.rig_id = $1 and ($2::bigint is null or l.id < $2) order by l.id desc limit $3`,
    [rigId, id, limit + 1],
  );
  if (found.length === 0) await demandExists("rig", rigId);
  const { items, nextCursor } = cutPage(found, limit, (load) => [load.id]);
  return { items: items.map(present), nextCursor };
}

const present = (load: LoadRow): LoadAnswer => ({ ...load, loadedAt: load.loadedAt.toISOString() });
