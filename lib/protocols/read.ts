import { z } from "zod";
import { row, rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page, type PageQuery } from "@/lib/http/paging";
import { readLaboratory } from "@/lib/laboratory";
import type { Definition } from "@/lib/protocol/schema";
import { usualEstimate } from "@/lib/protocols/plan";
import type { ProtocolAnswer, ProtocolItem, ProtocolQuery, VersionAnswer, VersionItem } from "@/lib/protocols/schema";

type ListRow = Omit<ProtocolItem, "changedAt" | "retiredAt" | "estimate"> & {
  changedAt: Date;
  retiredAt: Date | null;
  definition: Definition | null;
  sortKey: string | number;
};
type ProtocolRow = Omit<ProtocolAnswer, "createdAt" | "retiredAt" | "draftSavedAt" | "versions"> & { createdAt: Date; retiredAt: Date | null; draftSavedAt: Date | null };
type VersionRow = Omit<VersionItem, "savedAt"> & { savedAt: Date };

/** What a list is ordered by; times as text of fixed width, so that the cursor carries every microsecond. */
const SORT_KEYS = {
  name: "lower(name)",
  changed: `to_char("changedAt" at time zone 'UTC', 'YYYY-MM-DD HH24:MI:SS.US')`,
  campaigns: "campaigns",
  versions: "versions",
};

const CAMPAIGNS = (of: string) => `select count(*)::int from campaign c join protocol_version u on u.id = c.protocol_version_id where ${of} and c.state <> 'draft'`;

/** Protocols in the order asked for; what the newest version takes is on a rig and sensor like most. */
export async function findProtocols({ limit, cursor, sort, show, search, now }: ProtocolQuery & { now: Date }): Promise<Page<ProtocolItem>> {
  const isDown = sort.startsWith("-");
  const key = SORT_KEYS[sort.replace("-", "") as keyof typeof SORT_KEYS];
  const counts = sort.endsWith("campaigns") || sort.endsWith("versions");
  const [after, id] = readCursor(cursor, z.tuple([counts ? z.int32() : z.string(), idSchema])) ?? [null, null];
  const keyType = counts ? "integer" : "text";
  const [found, { timeZone }] = await Promise.all([
    rows<ListRow>(
      `with listed as (
         select p.id, p.name, v.version, v.id as "versionId", coalesce(v.version, 0) as versions, v.definition, p.draft is not null as "hasDraft",
                greatest(p.created_at, v.created_at, p.draft_saved_at, p.retired_at) as "changedAt", coalesce(w.name, m.name) as "changedBy",
                p.retired_at as "retiredAt", (${CAMPAIGNS("u.protocol_id = p.id")}) as campaigns
           from protocol p
           left join lateral (select * from protocol_version v where v.protocol_id = p.id order by v.version desc limit 1) v on true
           left join person w on w.id = v.created_by
           left join person m on m.id = p.created_by
          where (p.retired_at is not null) = ($1 = 'retired') and ($1 <> 'drafts' or p.draft is not null)
            and ($2::text is null or position(lower($2) in lower(p.name)) > 0))
       select *, ${key} as "sortKey" from listed
        where $3::text is null or (${key}, id) ${isDown ? "<" : ">"} ($3::${keyType}, $4::bigint)
        order by ${key} ${isDown ? "desc" : "asc"}, id ${isDown ? "desc" : "asc"} limit $5`,
      [show, search?.trim() || null, after === null ? null : String(after), id, limit + 1],
    ),
    readLaboratory(),
  ]);
  const { items, nextCursor } = cutPage(found, limit, (protocol) => [protocol.sortKey, protocol.id]);
  return {
    items: items.map(({ definition, sortKey: _, changedAt, retiredAt, ...protocol }) => ({
      ...protocol,
      changedAt: changedAt.toISOString(),
      retiredAt: retiredAt?.toISOString() ?? null,
      estimate: definition && protocol.versionId ? usualEstimate(protocol.versionId, definition, { now, timeZone }) : null,
    })),
    nextCursor,
  };
}

/** @throws AppError 404 when there is none. */
export async function getProtocol(protocolId: string): Promise<ProtocolAnswer> {
  const [found, versions] = await Promise.all([
    row<ProtocolRow>(
      `select p.id, p.name, p.created_at as "createdAt", w.name as "createdBy", p.retired_at as "retiredAt", p.draft, p.draft_saved_at as "draftSavedAt",
              (${CAMPAIGNS("u.protocol_id = p.id")}) as campaigns
         from protocol p left join person w on w.id = p.created_by where p.id = $1`,
      [protocolId],
    ),
    findVersions({ protocolId, limit: 200 }),
  ]);
  if (!found) throw notFound("protocol");
  return {
    ...found,
    createdAt: found.createdAt.toISOString(),
    retiredAt: found.retiredAt?.toISOString() ?? null,
    draftSavedAt: found.draftSavedAt?.toISOString() ?? null,
    versions: versions.items,
  };
}

const VERSION = `v.id, v.version, v.note, v.created_at as "savedAt", w.name as "savedBy", (${CAMPAIGNS("c.protocol_version_id = v.id")}) as campaigns`;

/** Versions of a protocol, newest first. @throws AppError 404 when there is no such protocol. */
export async function findVersions({ protocolId, limit, cursor }: PageQuery & { protocolId: string }): Promise<Page<VersionItem>> {
  const [before] = readCursor(cursor, z.tuple([z.int32()])) ?? [null];
  const found = await rows<VersionRow>(
    `select ${VERSION} from protocol_version v left join person w on w.id = v.created_by
      where v.protocol_id = $1 and ($2::integer is null or v.version < $2) order by v.version desc limit $3`,
    [protocolId, before, limit + 1],
  );
  if (found.length === 0) await demandExists("protocol", protocolId);
  const { items, nextCursor } = cutPage(found, limit, ({ version }) => [version]);
  return { items: items.map(presentVersion), nextCursor };
}

/** A frozen version with its definition. @throws AppError 404 when this protocol has none of that id. */
export async function getVersion({ protocolId, versionId }: { protocolId: string; versionId: string }): Promise<VersionAnswer> {
  const found = await row<VersionRow & Pick<VersionAnswer, "protocolId" | "protocolName" | "definition">>(
    `select ${VERSION}, p.id as "protocolId", p.name as "protocolName", v.definition
       from protocol_version v join protocol p on p.id = v.protocol_id left join person w on w.id = v.created_by where v.id = $1 and p.id = $2`,
    [versionId, protocolId],
  );
  if (!found) throw notFound("version of this protocol");
  return { ...presentVersion(found), protocolId: found.protocolId, protocolName: found.protocolName, definition: found.definition };
}

const presentVersion = ({ id, version, note, savedAt, savedBy, campaigns }: VersionRow): VersionItem => ({ id, version, note, savedAt: savedAt.toISOString(), savedBy, campaigns });
