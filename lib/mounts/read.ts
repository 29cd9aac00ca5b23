import { z } from "zod";
import { row, rows } from "@/lib/db";
import { demandExists } from "@/lib/demand-exists";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import type { MountAnswer, MountQuery } from "@/lib/mounts/schema";

type MountRow = Omit<MountAnswer, "from" | "to"> & { from: Date; to: Date | null };

const SELECT = `
  select m.id, m.sensor_id as "sensorId", s.serial, m.rig_id as "rigId", r.name as "rigName", m.position,
         lower(m.period) as "from", upper(m.period) as "to", p.name as "mountedBy", e.name as "endedBy", m.note
    from mount m join sensor s on s.id = m.sensor_id join rig r on r.id = m.rig_id
    left join person p on p.id = m.mounted_by left join person e on e.id = m.ended_by`;

/** @throws AppError 404 when there is none. */
export async function getMount(mountId: string): Promise<MountAnswer> {
  const found = await row<MountRow>(`${SELECT} where m.id = $1`, [mountId]);
  if (!found) throw notFound("mount");
  return present(found);
}

/** Mounts of a sensor or of a rig, or all, newest first. @throws AppError 404 when there is no such sensor. */
export async function findMounts({ sensorId, rigId, limit, cursor, open }: MountQuery & { sensorId?: string; rigId?: string }): Promise<Page<MountAnswer>> {
  const [id] = readCursor(cursor, z.tuple([idSchema])) ?? [null];
  const found = await rows<MountRow>(
    `${SELECT} where ($1::bigint is null or m.sensor_id = $1) and ($2::bigint is null or m.rig_id = $2)
       and ($3::boolean is null or upper_inf(m.period) = $3) and ($4::bigint is null or m.id < $4)
     order by m.id desc limit $5`,
    [sensorId ?? null, rigId ?? null, open === undefined ? null : open === "true", id, limit + 1],
  );
  if (sensorId && found.length === 0) await demandExists("sensor", sensorId);
  const { items, nextCursor } = cutPage(found, limit, (mount) => [mount.id]);
  return { items: items.map(present), nextCursor };
}

const present = ({ from, to, ...mount }: MountRow): MountAnswer => ({ ...mount, from: from.toISOString(), to: to?.toISOString() ?? null });
