import type { Transaction } from "sequelize";
import { z } from "zod";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import type { SensorAnswer, SensorQuery } from "@/lib/sensors/schema";

type SensorRow = Omit<SensorAnswer, "createdAt" | "retiredAt" | "mount" | "campaign"> & {
  createdAt: Date;
  retiredAt: Date | null;
  mountId: string | null;
  rigId: string;
  rigName: string;
  position: number;
  since: Date;
  campaignId: string | null;
  campaignName: string;
  campaignState: "running" | "held";
};

const SELECT = `
  select s.id, s.serial, s.kind, s.readout, s.nominal_f0_hz as "nominalF0Hz", s.nominal_q as "nominalQ", s.radius_m as "radiusM",
         s.note, s.created_at as "createdAt", s.retired_at as "retiredAt",
         m.id as "mountId", m.rig_id as "rigId", r.name as "rigName", m.position, lower(m.period) as since,
         c.id as "campaignId", c.name as "campaignName", c.state as "campaignState",
         (select count(*)::int from campaign n where n.sensor_id = s.id and n.state <> 'draft') as campaigns
    from sensor s
    left join mount m on m.sensor_id = s.id and upper_inf(m.period)
    left join rig r on r.id = m.rig_id
    left join lateral (
      select id, name, state from campaign where sensor_id = s.id and state in ('running', 'held') order by set_aside, id desc limit 1) c on true`;

/** @throws AppError 404 when there is none. */
export async function getSensor(sensorId: string, transaction?: Transaction): Promise<SensorAnswer> {
  const found = await row<SensorRow>(`${SELECT} where s.id = $1`, [sensorId], transaction);
  if (!found) throw notFound("sensor");
  return present(found);
}

/** Sensors by serial number, those in use or the retired ones. */
export async function findSensors({ limit, cursor, retired, search }: SensorQuery): Promise<Page<SensorAnswer>> {
  const [serial, id] = readCursor(cursor, z.tuple([z.string(), idSchema])) ?? [null, null];
  const found = await rows<SensorRow>(
    `${SELECT} where (s.retired_at is not null) = $1 and ($2::text is null or (s.serial, s.id) > ($2, $3::bigint))
       and ($4::text is null or position(lower($4) in lower(s.serial)) > 0)
     order by s.serial, s.id limit $5`,
    [retired === "true", serial, id, search?.trim() || null, limit + 1],
  );
  const { items, nextCursor } = cutPage(found, limit, (sensor) => [sensor.serial, sensor.id]);
  return { items: items.map(present), nextCursor };
}

function present({ mountId, rigId, rigName, position, since, campaignId, campaignName, campaignState, createdAt, retiredAt, ...sensor }: SensorRow): SensorAnswer {
  return {
    ...sensor,
    mount: mountId === null ? null : { id: mountId, rigId, rigName, position, since: since.toISOString() },
    campaign: campaignId === null ? null : { id: campaignId, name: campaignName, state: campaignState },
    createdAt: createdAt.toISOString(),
    retiredAt: retiredAt?.toISOString() ?? null,
  };
}
