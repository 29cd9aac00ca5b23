import { rows } from "@/lib/db";

/**
 * Campaigns that something is to be decided for: marked so, a real rig's wait or start has fallen due, or a hold has lasted
 * longer than the protocol lets a filled cell wait. Marks what it finds by the clock, so that `advanceCampaign` takes it up.
 */
export async function findCampaignsToAdvance({ now }: { now: Date }): Promise<string[]> {
  const found = await rows<{ id: string }>(
    `with clocked as (
       select c.id, c.state, c.parking, c.start_at, v.definition,
              case when rig.clock = 'real' then $1::timestamptz else rig.reported_clock end as clock
         from campaign c join rig on rig.id = c.rig_id join protocol_version v on v.id = c.protocol_version_id
        where c.state in ('queued', 'running', 'held') or c.parking in ('wanted', 'running')),
     due as (
       select id, false as park from clocked where state = 'queued' and clock is not null and (start_at is null or start_at <= clock)
       union
       select clocked.id, false from clocked join step s on s.campaign_id = clocked.id and s.kind = 'wait' and s.state = 'ready' and s.due_at <= clock
        where clocked.state = 'running' or parking = 'running'
       union
       select id, true from clocked
        where state = 'held' and parking = 'none' and jsonb_array_length(coalesce(definition->'park', '[]')) > 0 and definition ? 'parkAfterS'
          and exists (select 1 from hold where campaign_id = clocked.id and released_at is null
                       and opened_at < $1::timestamptz - make_interval(secs => (definition->>'parkAfterS')::float8))
          and not exists (select 1 from hold where campaign_id = clocked.id and released_at is null and reason = 'takeOver')),
     marked as (
       update campaign c set needs_advance = true, parking = case when d.park then 'wanted' else c.parking end
         from (select id, bool_or(park) as park from due group by id) d where c.id = d.id
       returning c.id)
     select id from marked union select id from campaign where needs_advance`,
    [now],
  );
  return found.map(({ id }) => id);
}

/** When the clock will next make something of a campaign on a real rig: a wait that ends, or a start. Within 400 days. */
export function findNextDue({ now }: { now: Date }): Promise<{ campaignId: string; dueAt: Date }[]> {
  return rows<{ campaignId: string; dueAt: Date }>(
    `select c.id as "campaignId", coalesce(s.due_at, c.start_at) as "dueAt"
       from campaign c join rig on rig.id = c.rig_id and rig.clock = 'real'
       left join step s on s.campaign_id = c.id and s.kind = 'wait' and s.state = 'ready'
      where ((c.state = 'queued' and c.start_at > $1) or ((c.state = 'running' or c.parking = 'running') and s.due_at > $1))
        and coalesce(s.due_at, c.start_at) < $1::timestamptz + interval '400 days'`,
    [now],
  );
}
