import { Op, type WhereOptions } from "sequelize";
import { z } from "zod";
import { detailLines, type NameOf } from "@/lib/audit/detail-lines";
import { namesIn } from "@/lib/audit/names";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";
import { time } from "@/lib/schema";
import { demand, type Actor } from "@/lib/people/actor";
import type { AuditEventAnswer } from "@/lib/people/schema";
import { AuditEvent } from "@/models/audit-event";

type Find = PageQuery & { by: Actor; personId?: string; entity?: string; entityId?: string; since?: string; until?: string };

/** Newest first; names are those of today. */
export async function findAuditEvents({ by, limit, cursor, personId, entity, entityId, since, until }: Find): Promise<Page<AuditEventAnswer>> {
  demand(by, "audit log");
  const after = readCursor(cursor, z.tuple([time, idSchema]));
  const where: WhereOptions[] = [];
  if (personId) where.push({ personId });
  if (entity) where.push({ entity });
  if (entityId) where.push({ entityId });
  if (since) where.push({ at: { [Op.gte]: new Date(since) } });
  if (until) where.push({ at: { [Op.lt]: new Date(until) } });
  if (after) {
    const at = new Date(after[0]);
    where.push({ [Op.or]: [{ at: { [Op.lt]: at } }, { at, id: { [Op.lt]: after[1] } }] });
  }
  const found = await AuditEvent.findAll({ where: { [Op.and]: where }, order: [["at", "desc"], ["id", "desc"]], limit: limit + 1 });
  const nameOf = await namesIn(found);
  return cutPage(found.map((event) => present(event, nameOf)), limit, ({ at, id }) => [at, id]);
}

const present = ({ id, at, who, personId, rigId, action, entity, entityId, detail }: AuditEvent, nameOf: NameOf): AuditEventAnswer => ({
  id,
  at: at.toISOString(),
  who,
  personId,
  rigId,
  action,
  entity,
  entityId,
  detail,
  about: nameOf(entity, entityId) ?? null,
  lines: detailLines(action, detail, nameOf),
});
