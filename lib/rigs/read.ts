import type { Transaction } from "sequelize";
import { z } from "zod";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import type { RigAnswer, RigQuery } from "@/lib/rigs/schema";
import { presentRig, type RigRow } from "@/lib/rigs/present";

/** What a rig is doing comes from the campaign that occupies it: running, held and not set aside, or still parking. */
export const OCCUPIES = "c.origin = 'protocol' and not c.set_aside and (c.state in ('running', 'held') or c.parking in ('wanted', 'running'))";

const SELECT = `
  select r.id, r.name, r.time_zone as "timeZone", r.clock, r.waste_capacity_ml as "wasteCapacityMl", r.waste_ml as "wasteMl",
         r.temperature_c as "temperatureC", r.last_contact_at as "lastContactAt", r.reported_clock as "reportedClock",
         r.clock_offset_ms as "clockOffsetMs", r.abilities, r.agent_state as "agentState", r.agent_message as "agentMessage",
         r.created_at as "createdAt", r.retired_at as "retiredAt",
         a.agent_name as "agentName", a.agent_version as "agentVersion",
         c.id as "campaignId", c.rig_number as "campaignNumber", c.name as "campaignName", c.state as "campaignState",
         c.cursor_text as "cursorText", s.serial as "sensorSerial",
         array(select distinct h.reason from hold h where h.campaign_id = c.id and h.released_at is null order by 1) as holds,
         c.started_clock + make_interval(secs => (c.planned->>'seconds')::float8) as "plannedEnd",
         (select count(*)::int from campaign q where q.rig_id = r.id and q.state = 'queued') as queued,
         coalesce(p.ports, '[]') as ports, coalesce(m.mounts, '[]') as mounts
    from rig r
    left join campaign c on c.rig_id = r.id and ${OCCUPIES}
    left join sensor s on s.id = c.sensor_id
    left join lateral (select agent_name, agent_version from agent_session where rig_id = r.id order by id desc limit 1) a on true
    left join lateral (
      select jsonb_agg(jsonb_build_object(
               'number', p.number, 'remainingMl', p.remaining_ml, 'loadId', l.id::text, 'lotId', lot.id::text, 'lotCode', lot.code,
               'expiresAt', lot.expires_at, 'liquidId', q.id::text, 'liquidName', q.name, 'letter', q.letter,
               'model', q.model, 'massFraction', q.mass_fraction, 'table', q.property_table, 'loadedAt', l.loaded_at,
               'fullMl', (select max(b.volume_ml) from load b where b.rig_id = p.rig_id and b.port = p.number and b.lot_id = l.lot_id))
             order by p.number) as ports
        from port p
        left join load l on l.id = p.load_id
        left join lot on lot.id = l.lot_id
        left join liquid q on q.id = lot.liquid_id
       where p.rig_id = r.id) p on true
    left join lateral (
      select jsonb_agg(jsonb_build_object('id', m.id::text, 'position', m.position, 'sensorId', m.sensor_id::text, 'serial', ms.serial,
                                          'since', lower(m.period)) order by m.position) as mounts
        from mount m join sensor ms on ms.id = m.sensor_id
       where m.rig_id = r.id and upper_inf(m.period)) m on true`;

/** @throws AppError 404 when there is none. */
export async function getRig(rigId: string, transaction?: Transaction): Promise<RigAnswer> {
  const found = await row<RigRow>(`${SELECT} where r.id = $1`, [rigId], transaction);
  if (!found) throw notFound("rig");
  return presentRig(found);
}

/** Rigs by name, those in use or the retired ones. */
export async function findRigs({ limit, cursor, retired }: RigQuery): Promise<Page<RigAnswer>> {
  const [name, id] = readCursor(cursor, z.tuple([z.string(), idSchema])) ?? [null, null];
  const found = await rows<RigRow>(
    `${SELECT} where (r.retired_at is not null) = $1 and ($2::text is null or (r.name, r.id) > ($2, $3::bigint))
     order by r.name, r.id limit $4`,
    [retired === "true", name, id, limit + 1],
  );
  const { items, nextCursor } = cutPage(found, limit, (rig) => [rig.name, rig.id]);
  return { items: items.map(presentRig), nextCursor };
}
