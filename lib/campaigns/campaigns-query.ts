import { SHIFT_U } from "@/lib/phases/shift-uncertainty";

/** Everything a list row shows, in one query whatever the page's length; $1 is the present. `CAMPAIGNS_FROM` follows. */
export const CAMPAIGNS = `
  select c.id, c.name, c.rig_number as number, c.state, c.set_aside as "setAside", c.origin, c.priority, c.parking, c.rig_id as "rigId",
         rig.name as rig, coalesce(rig.time_zone, (select format->>'timeZone' from import_run where campaign_id = c.id), 'UTC') as "timeZone", rig.clock, rig.last_contact_at as "lastContactAt",
         c.sensor_id as "sensorId", s.serial as sensor, v.protocol_id as "protocolId", c.protocol_version_id as "protocolVersionId",
         p.name as protocol, v.version, c.start_at as "startAt", c.created_at as "createdAt", c.started_at as "startedAt", c.ended_at as "endedAt",
         c.started_clock as "startedClock", c.ended_clock as "endedClock", c.end_text as "endText", c.cursor, c.cursor_text as "cursorText",
         c.planned, case when c.origin = 'import' then (select max(cycle) from step where campaign_id = c.id) end as "importedCycles", person.name as "createdBy", coalesce(h.reasons, '{}') as "holdReasons", coalesce(done.repeats, 0)::int as repeats,
         case when rig.clock = 'simulated' then rig.reported_clock else $1::timestamptz end as "rigNow", open.kind as "stepKind",
         air.hz / air.baseline * 1e6 as "shiftPpm", air.hz as "shiftHz", air.u as "shiftU",
         (select min((l->>'tolerancePpm')::float8) from jsonb_array_elements(v.definition->'limits') l where l->>'kind' = 'return') * 1e-6 * air.baseline as "limitHz",
         last.f0_mean as "f0Hz", last.f0_u as "f0U", last.q_mean as q, last.q_u as "qU", last.medium`;

export const CAMPAIGNS_FROM = `
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
      select su.f0_mean - b.f0_hz as hz, b.f0_hz as baseline, ${SHIFT_U} as u
        from phase ph join phase_summary su on su.phase_id = ph.id join fit_run r on r.id = su.fit_run_id and r.current
        join baseline b on b.campaign_id = ph.campaign_id and b.mount_id is not distinct from ph.mount_id and b.set_point_c is not distinct from ph.set_point_c
                       and b.readout = ph.readout and b.fit_run_id = r.id
       where ph.campaign_id = c.id and ph.role = 'reference' and ph.medium = 'air' and su.f0_mean is not null
       order by ph.sequence desc limit 1) air on true
    left join lateral (
      select su.f0_mean, su.f0_u, su.q_mean, su.q_u, ph.medium
        from phase ph join phase_summary su on su.phase_id = ph.id join fit_run r on r.id = su.fit_run_id and r.current
       where ph.campaign_id = c.id and su.f0_mean is not null order by ph.sequence desc limit 1) last on true`;
