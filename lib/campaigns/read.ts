import { z } from "zod";
import type { CampaignAnswer, CampaignItem, CampaignQuery } from "@/lib/campaigns/answers";
import { iso, presentCampaign, type CampaignRecord } from "@/lib/campaigns/present";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";

/** Everything a list row shows, in one query whatever the page's length. */
const SELECT = `
  select c.id, c.name, c.rig_number as number, c.state, c.set_aside as "setAside", c.origin, c.priority, c.parking, c.rig_id as "rigId",
         rig.name as rig, coalesce(rig.time_zone, 'UTC') as "timeZone", rig.clock, rig.last_contact_at as "lastContactAt",
         c.sensor_id as "sensorId", s.serial as sensor, v.protocol_id as "protocolId", c.protocol_version_id as "protocolVersionId",
         p.name as protocol, v.version, c.start_at as "startAt", c.created_at as "createdAt", c.started_at as "startedAt", c.ended_at as "endedAt",
         c.started_clock as "startedClock", c.ended_clock as "endedClock", c.end_text as "endText", c.cursor, c.cursor_text as "cursorText",
         c.planned, person.name as "createdBy", coalesce(h.reasons, '{}') as "holdReasons", coalesce(done.repeats, 0)::int as repeats,
         case when rig.clock = 'simulated' then rig.reported_clock else $1::timestamptz end as "rigNow", open.kind as "stepKind",
         air.ppm as "shiftPpm", last.f0_mean as "f0Hz", last.f0_u as "f0U", last.q_mean as q, last.q_u as "qU", last.medium
    from campaign c
    left join rig on rig.id = c.rig_id
    left join sensor s on s.id = c.sensor_id
    left join protocol_version v on v.id = c.protocol_version_id
    left join protocol p on p.id = v.protocol_id
    left join person on person.id = c.created_by
    left join lateral (select array_agg(distinct reason) as reasons from hold where campaign_id = c.id and released_at is null) h on true
    left join lateral (select sum(st.stored) as repeats from step st where st.campaign_id = c.id and st.kind = 'measure' and st.role <> 'find') done on true
    left join step open on open.campaign_id = c.id and open.state in ('ready', 'out')
    left join lateral (
      select (su.f0_mean / b.f0_hz - 1) * 1e6 as ppm
        from phase ph join phase_summary su on su.phase_id = ph.id join fit_run r on r.id = su.fit_run_id and r.current
        join baseline b on b.campaign_id = ph.campaign_id and b.mount_id = ph.mount_id and b.set_point_c is not distinct from ph.set_point_c
                       and b.readout = ph.readout and b.fit_run_id = r.id
       where ph.campaign_id = c.id and ph.role = 'reference' and ph.medium = 'air' and su.f0_mean is not null
       order by ph.sequence desc limit 1) air on true
    left join lateral (
      select su.f0_mean, su.f0_u, su.q_mean, su.q_u, ph.medium
        from phase ph join phase_summary su on su.phase_id = ph.id join fit_run r on r.id = su.fit_run_id and r.current
       where ph.campaign_id = c.id and su.f0_mean is not null order by ph.sequence desc limit 1) last on true`;

const STATES: Record<NonNullable<CampaignQuery["state"]>, readonly string[]> = {
  "on-rigs": ["running", "held"],
  "in-line": ["queued"],
  done: ["finished", "stopped", "failed"],
  draft: ["draft"],
};

/** Campaigns, the newest first unless asked otherwise; filtered by state, rig, sensor, protocol and words. */
export async function findCampaigns({ query, now }: { query: CampaignQuery; now: Date }): Promise<Page<CampaignItem>> {
  const { state, rigId, sensorId, protocolId, search, sort, limit } = query;
  const byName = sort === "name";
  const [key, id] = readCursor(query.cursor, z.tuple([z.string(), idSchema])) ?? [null, null];
  const beyond = sort === "newest" ? "<" : ">";
  const found = await rows<CampaignRecord>(
    `${SELECT}
      where ($2::text[] is null or c.state = any($2)) and ($3::bigint is null or c.rig_id = $3) and ($4::bigint is null or c.sensor_id = $4)
        and ($5::bigint is null or v.protocol_id = $5)
        and ($6::text is null or c.name ilike $6 or s.serial ilike $6 or rig.name ilike $6 or p.name ilike $6 or 'C-' || c.id ilike $6)
        and ($7::text is null or ${byName ? `(c.name, c.id) ${beyond} ($7, $8::bigint)` : `c.id ${beyond} $8::bigint`})
      order by ${byName ? "c.name, c.id" : `c.id ${sort === "newest" ? "desc" : "asc"}`}
      limit $9`,
    [now, state ? STATES[state] : null, rigId ?? null, sensorId ?? null, protocolId ?? null, search ? `%${escapeLike(search)}%` : null, key, id, limit + 1],
  );
  const { items, nextCursor } = cutPage(found, limit, (campaign) => [byName ? campaign.name : campaign.id, campaign.id]);
  return { items: items.map(presentCampaign), nextCursor };
}

const escapeLike = (text: string) => text.replace(/[\\%_]/g, "\\$&");

/** @throws AppError 404 when there is none. */
export async function getCampaign({ campaignId, now }: { campaignId: string; now: Date }): Promise<CampaignAnswer> {
  const found = await row<CampaignRecord>(`${SELECT} where c.id = $2`, [now, campaignId]);
  if (!found) throw notFound("campaign");
  const [holds, slots, media, step] = await Promise.all([
    rows<{ id: string; reason: CampaignAnswer["holds"][number]["reason"]; by: string | null; openedAt: Date; releasedAt: Date | null; text: string }>(
      `select h.id, h.reason, p.name as by, h.opened_at as "openedAt", h.released_at as "releasedAt", h.text
         from hold h left join person p on p.id = h.opened_by where h.campaign_id = $1 order by h.opened_at desc, h.id desc limit 200`,
      [campaignId],
    ),
    rows<CampaignAnswer["slots"][number]>(
      `select cs.slot, cs.port, lot.id as "lotId", lot.code as lot, l.id as "liquidId", l.name as liquid, l.letter
         from campaign_slot cs join lot on lot.id = cs.lot_id join liquid l on l.id = lot.liquid_id where cs.campaign_id = $1 order by cs.port`,
      [campaignId],
    ),
    rows<{ medium: string; repeats: number; setPointC: number | null }>(
      `select p.medium, p.set_point_c as "setPointC", sum(s.stored)::int as repeats from phase p join step s on s.id = p.step_id
        where p.campaign_id = $1 group by 1, 2 order by min(p.sequence)`,
      [campaignId],
    ),
    row<{ sequence: number; kind: string; label: string; state: string; stored: number; repeats: number | null; dueAt: Date | null }>(
      `select sequence, kind, label, state, stored, (params->>'repeats')::int as repeats, due_at as "dueAt" from step
        where campaign_id = $1 and state in ('ready', 'out')`,
      [campaignId],
    ),
  ]);
  const names = new Map(slots.map(({ slot, letter, liquid }) => [slot, { letter, name: liquid }]));
  const repeatsOf = new Map<string, number>();
  for (const { medium, repeats } of media) repeatsOf.set(medium, (repeatsOf.get(medium) ?? 0) + repeats);
  return {
    ...presentCampaign(found),
    createdBy: found.createdBy,
    endText: found.endText,
    parking: found.parking,
    holds: holds.map(({ by, openedAt, releasedAt, ...hold }) => ({
      ...hold,
      ...(by ? { by } : {}),
      openedAt: openedAt.toISOString(),
      ...(releasedAt ? { releasedAt: releasedAt.toISOString() } : {}),
    })),
    slots,
    media: [...repeatsOf].map(([medium, repeats]) => ({ medium, repeats, letter: null, name: medium === "air" ? "Air" : medium, ...names.get(medium) })),
    setPointsC: [...new Set(media.flatMap(({ setPointC }) => setPointC ?? []))],
    step: step ? { ...step, dueAt: iso(step.dueAt) } : null,
    lastContactAt: iso(found.lastContactAt),
    clock: found.clock ?? "real",
    now: (found.rigNow ?? now).toISOString(),
  };
}
