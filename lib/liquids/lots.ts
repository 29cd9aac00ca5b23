import type { Transaction } from "sequelize";
import { z } from "zod";
import { row, rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import type { LotAnswer, LotQuery } from "@/lib/liquids/schema";

type LotRow = Omit<LotAnswer, "receivedAt" | "expiresAt" | "createdAt"> & { receivedAt: Date | null; expiresAt: Date | null; createdAt: Date };

const SELECT = `
  select lot.id, lot.liquid_id as "liquidId", q.name as "liquidName", q.letter, lot.code, lot.received_at as "receivedAt",
         lot.expires_at as "expiresAt", lot.certificate, lot.created_at as "createdAt",
         (select count(distinct s.campaign_id)::int from campaign_slot s where s.lot_id = lot.id) as campaigns,
         coalesce(p.ports, '[]') as ports
    from lot join liquid q on q.id = lot.liquid_id
    left join lateral (
      select jsonb_agg(jsonb_build_object('rigId', p.rig_id::text, 'rigName', r.name, 'port', p.number, 'remainingMl', p.remaining_ml,
               'fullMl', greatest(p.remaining_ml, (select max(b.volume_ml) from load b where b.rig_id = p.rig_id and b.port = p.number and b.lot_id = lot.id)))
             order by r.name, p.number) as ports
        from port p join load l on l.id = p.load_id join rig r on r.id = p.rig_id where l.lot_id = lot.id) p on true`;

/** @throws AppError 404 when there is none. */
export async function getLot(lotId: string, transaction?: Transaction): Promise<LotAnswer> {
  const found = await row<LotRow>(`${SELECT} where lot.id = $1`, [lotId], transaction);
  if (!found) throw notFound("lot");
  return present(found);
}

/** Lots, of one liquid if asked, newest first. @throws AppError 404 when there is no such liquid. */
export async function findLots({ limit, cursor, liquidId, search }: LotQuery): Promise<Page<LotAnswer>> {
  const [id] = readCursor(cursor, z.tuple([idSchema])) ?? [null];
  const found = await rows<LotRow>(
    `${SELECT} where ($1::bigint is null or lot.liquid_id = $1) and ($2::bigint is null or lot.id < $2)
       and ($3::text is null or position(lower($3) in lower(lot.code || ' ' || q.name)) > 0)
     order by lot.id desc limit $4`,
    [liquidId ?? null, id, search?.trim() || null, limit + 1],
  );
  if (liquidId && found.length === 0) await demandExists("liquid", liquidId);
  const { items, nextCursor } = cutPage(found, limit, (lot) => [lot.id]);
  return { items: items.map(present), nextCursor };
}

const present = (lot: LotRow): LotAnswer => ({
  ...lot,
  receivedAt: lot.receivedAt?.toISOString() ?? null,
  expiresAt: lot.expiresAt?.toISOString() ?? null,
  createdAt: lot.createdAt.toISOString(),
});
