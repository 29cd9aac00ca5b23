import { campaignWhere, STATES } from "@/lib/campaigns/filter";
import type { OverviewAnswer, OverviewQuery } from "@/lib/campaigns/overview-schema";
import { row, rows } from "@/lib/db";

const FROM = `
  from campaign c left join rig on rig.id = c.rig_id left join sensor s on s.id = c.sensor_id
  left join protocol_version v on v.id = c.protocol_version_id left join protocol p on p.id = v.protocol_id`;

const HALTED = "('limit', 'failure', 'silence')";

type Counts = { total: number; shown: number; state: number; rigId: number; sensorId: number; search: number } & OverviewAnswer["places"];

/** How many campaigns do what, how many the filter shows, what it would show with one word less, and the words to filter by. */
export async function readOverview(query: OverviewQuery): Promise<OverviewAnswer> {
  const [counts, words, rigs, sensors] = await Promise.all([
    count(query),
    row<OverviewAnswer["words"]>(
      `select count(*) filter (where c.state = 'running')::int as measuring, count(*) filter (where c.state = 'queued')::int as queued,
              count(*) filter (where c.state = 'held' and h.halted)::int as halted,
              count(*) filter (where c.state = 'held' and not h.halted and h.waits)::int as waiting,
              count(*) filter (where c.state = 'held' and not h.halted and not h.waits)::int as paused
         from campaign c left join lateral (
           select coalesce(bool_or(reason in ${HALTED}), false) as halted, coalesce(bool_or(reason = 'task'), false) as waits
             from hold where campaign_id = c.id and released_at is null) h on true
        where c.state in ('running', 'held', 'queued')`,
    ),
    rows<{ id: string; name: string }>(`select id, name from rig where exists (select 1 from campaign where rig_id = rig.id) order by name limit 200`),
    rows<{ id: string; serial: string }>(`select id, serial from sensor where exists (select 1 from campaign where sensor_id = sensor.id) order by serial limit 500`),
  ]);
  const { total, shown, state: withoutState, rigId, sensorId, search, ...places } = counts;
  return { total, shown, places, without: { state: withoutState, rigId, sensorId, search }, words: words ?? { measuring: 0, paused: 0, waiting: 0, halted: 0, queued: 0 }, rigs, sensors };
}

async function count(filter: OverviewQuery): Promise<Counts> {
  const variants = { shown: filter, state: { ...filter, state: undefined }, rigId: { ...filter, rigId: undefined }, sensorId: { ...filter, sensorId: undefined }, search: { ...filter, search: undefined } };
  const bind: unknown[] = [];
  const filters = Object.entries(variants).map(([name, variant]) => {
    const { where, bind: values } = campaignWhere(variant, bind.length + 1);
    bind.push(...values);
    return [name, where] as const;
  });
  const stateless = filters[1][1];
  const columns = [
    ...filters.map(([name, where]) => `count(*) filter (where ${where})::int as "${name}"`),
    ...Object.entries(STATES).map(([name, where]) => `count(*) filter (where ${where} and (${stateless}))::int as "${name}"`),
  ];
  const found = await row<Counts>(`select count(*)::int as total, ${columns.join(", ")} ${FROM}`, bind);
  if (!found) throw new Error("a count answered no row");
  return found;
}
