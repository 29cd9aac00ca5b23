import type { Transaction } from "sequelize";
import { z } from "zod";
import type { AlarmAnswer, AlarmDetail, AlarmQuery } from "@/lib/alarms/schema";
import { readSeries } from "@/lib/alarms/series";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import { time } from "@/lib/schema";

type Nullable<T> = { [K in keyof T]-?: undefined extends T[K] ? Exclude<T[K], undefined> | null : T[K] };
type Times = "openedAt" | "shelvedUntil" | "openedClock" | "acknowledgedAt" | "returnedAt" | "clearedAt";

type AlarmRow = Omit<Nullable<AlarmAnswer>, Times | "limit" | "events"> &
  Record<Exclude<Times, "openedAt">, Date | null> & { openedAt: Date; limitValue: number | null; events: AlarmAnswer["events"] | null };

const SELECT = `
  select a.id, a.campaign_id as "campaignId", a.rig_id as "rigId", a.sensor_id as "sensorId", a.source, a.limit_id as "limitId", a.kind, a.state,
         case when a.shelved_until > $1 then a.shelved_until end as "shelvedUntil", a.opened_at as "openedAt", a.phase_id as "phaseId", a.value,
         a.limit_value as "limitValue", a.unit, a.text, a.found_on_refit as "foundOnRefit", a.action_text as "actionText",
         case when rig.clock = 'simulated' then a.opened_clock end as "openedClock", rig.name as rig, rig.time_zone as "timeZone",
         c.name as campaign, s.serial as sensor, taken.name as "acknowledgedBy", a.acknowledged_at as "acknowledgedAt",
         a.returned_at as "returnedAt", cleared.name as "clearedBy", a.cleared_at as "clearedAt", a.clear_note as "clearNote", e.events
    from alarm a
    join rig on rig.id = a.rig_id
    left join campaign c on c.id = a.campaign_id
    left join sensor s on s.id = a.sensor_id
    left join person taken on taken.id = a.acknowledged_by
    left join person cleared on cleared.id = a.cleared_by
    left join lateral (
      select json_agg(json_build_object('at', at, 'kind', kind, 'who', who, 'text', text) order by id) as events
        from (select * from alarm_event where alarm_id = a.id order by id desc limit 20) latest) e on true`;

const STATES: Record<NonNullable<AlarmQuery["state"]>, string> = {
  open: "a.state <> 'cleared'",
  past: "a.state = 'cleared'",
  shelved: "a.state <> 'cleared' and a.shelved_until > $1",
  unacknowledged: "a.state = 'unacknowledged'",
  acknowledged: "a.state = 'acknowledged'",
  returned: "a.state = 'returned'",
  cleared: "a.state = 'cleared'",
};

/** Alarms, the newest first. */
export async function findAlarms({ query, now }: { query: AlarmQuery; now: Date }): Promise<Page<AlarmAnswer>> {
  const { state, rigId, campaignId, kind, since, limit } = query;
  const [at, id] = readCursor(query.cursor, z.tuple([time, idSchema])) ?? [null, null];
  const found = await rows<AlarmRow>(
    `${SELECT}
      where ${state ? STATES[state] : "true"} and ($2::bigint is null or a.rig_id = $2) and ($3::bigint is null or a.campaign_id = $3)
        and ($4::text is null or a.kind = $4) and ($5::timestamptz is null or a.opened_at >= $5)
        and ($6::timestamptz is null or (a.opened_at, a.id) < ($6, $7::bigint))
      order by a.opened_at desc, a.id desc limit $8`,
    [now, rigId ?? null, campaignId ?? null, kind ?? null, since ?? null, at, id, limit + 1],
  );
  const { items, nextCursor } = cutPage(found, limit, (alarm) => [alarm.openedAt.toISOString(), alarm.id]);
  return { items: items.map(present), nextCursor };
}

/** @throws AppError 404 when there is none. */
export async function getAlarm({ alarmId, now }: { alarmId: string; now: Date }): Promise<AlarmDetail> {
  const alarm = await readAlarm({ alarmId, now });
  return { ...alarm, series: await readSeries(alarm) };
}

export async function readAlarm({ alarmId, now }: { alarmId: string; now: Date }, transaction?: Transaction): Promise<AlarmAnswer> {
  const found = await row<AlarmRow>(`${SELECT} where a.id = $2`, [now, alarmId], transaction);
  if (!found) throw notFound("alarm");
  return present(found);
}

function present({ limitValue, openedAt, shelvedUntil, openedClock, acknowledgedAt, returnedAt, clearedAt, events, ...alarm }: AlarmRow): AlarmAnswer {
  const known = Object.fromEntries(Object.entries(alarm).filter(([, value]) => value !== null)) as Omit<AlarmAnswer, Times | "limit" | "events">;
  const times = { shelvedUntil, openedClock, acknowledgedAt, returnedAt, clearedAt };
  return {
    ...known,
    ...(limitValue === null ? {} : { limit: limitValue }),
    openedAt: openedAt.toISOString(),
    ...Object.fromEntries(Object.entries(times).flatMap(([name, at]) => (at ? [[name, at.toISOString()]] : []))),
    events: (events ?? []).map((event) => ({ ...event, at: new Date(event.at).toISOString() })),
  };
}
