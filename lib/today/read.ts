import { findAlarms } from "@/lib/alarms/read";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { SILENT_AFTER_S } from "@/lib/alarms/silence";
import { campaignQuery, type CampaignItem } from "@/lib/campaigns/answers";
import { findCampaigns } from "@/lib/campaigns/read";
import { rows } from "@/lib/db";
import { formatCount } from "@/lib/format";
import { startOfLocalDay } from "@/lib/format-time";
import { readLaboratory } from "@/lib/laboratory";
import { OCCUPIES } from "@/lib/rigs/read";
import { findTasks } from "@/lib/tasks/read";
import { readLog } from "@/lib/today/log";
import type { TodayAnswer, TodayRig } from "@/lib/today/schema";

const MOST = 50;

type RigRow = {
  id: string;
  name: string;
  timeZone: string;
  clock: "real" | "simulated";
  now: Date | null;
  lastContactAt: Date | null;
  campaignId: string | null;
  state: string | null;
  parked: boolean;
  haltedAt: Date | null;
  takenOnBy: string | null;
  next: { id: string; name: string } | null;
  step: { kind: string; label: string; liquid: string | null; stored: number; repeats: number | null } | null;
};

const RIGS = `
  select r.id, r.name, r.time_zone as "timeZone", r.clock, case when r.clock = 'real' then $1::timestamptz else r.reported_clock end as now,
         r.last_contact_at as "lastContactAt", c.id as "campaignId", c.state, coalesce(c.parking = 'parked', false) as parked,
         halt.at as "haltedAt", taken.name as "takenOnBy", queued.next, open.step
    from rig r
    left join campaign c on c.rig_id = r.id and ${OCCUPIES}
    left join lateral (
      select min(case when r.clock = 'real' then opened_at else coalesce(opened_clock, opened_at) end) as at from hold
       where campaign_id = c.id and released_at is null and reason in ('limit', 'failure', 'silence')) halt on true
    left join lateral (
      select p.name from alarm a join person p on p.id = a.acknowledged_by
       where a.campaign_id = c.id and a.state = 'acknowledged' order by a.opened_at desc limit 1) taken on true
    left join lateral (
      select json_build_object('id', q.id::text, 'name', q.name) as next from campaign q
       where q.rig_id = r.id and q.state = 'queued' order by q.priority desc, q.queued_at, q.id limit 1) queued on true
    left join lateral (
      select json_build_object('kind', s.kind, 'label', s.label, 'liquid', l.name, 'stored', s.stored, 'repeats', (s.params->>'repeats')::int) as step
        from step s
        left join campaign_slot cs on cs.campaign_id = s.campaign_id and cs.slot = s.medium
        left join lot on lot.id = cs.lot_id left join liquid l on l.id = lot.liquid_id
       where s.campaign_id = c.id and s.state in ('ready', 'out') limit 1) open on true
   where r.retired_at is null order by c.id is null, r.name, r.id`;

/** What runs, what needs a person, what ends when, and what happened while nobody was there. */
export async function readToday({ now }: { now: Date }): Promise<TodayAnswer> {
  const laboratory = await readLaboratory();
  const since = new Date(startOfLocalDay(now, laboratory.timeZone) - 6 * 3_600_000);
  const [rigs, campaigns, alarms, tasks, log] = await Promise.all([
    rows<RigRow>(RIGS, [now]),
    findCampaigns({ query: campaignQuery.parse({ state: "on-rigs", limit: 200 }), now }),
    findAlarms({ query: { state: "open", limit: MOST }, now }),
    findTasks({ state: "open", limit: MOST }),
    readLog({ since }),
  ]);
  const byId = new Map(campaigns.items.map((campaign) => [campaign.id, campaign]));
  return {
    now: now.toISOString(),
    laboratory,
    rigs: rigs.map((rig) => present(rig, byId.get(rig.campaignId ?? "") ?? null, now)),
    alarms: alarms.items.toSorted((a, b) => rank(a) - rank(b) || Number(!a.campaignId) - Number(!b.campaignId)),
    tasks: tasks.items,
    moreTasks: tasks.nextCursor !== null,
    log: { since: since.toISOString(), items: log },
  };
}

const rank = ({ state, shelvedUntil }: AlarmAnswer): number => (shelvedUntil ? 3 : { unacknowledged: 0, returned: 1, acknowledged: 2, cleared: 3 }[state]);

function present(rig: RigRow, campaign: CampaignItem | null, now: Date): TodayRig {
  const quietMs = rig.lastContactAt ? now.getTime() - rig.lastContactAt.getTime() : 0;
  return {
    id: rig.id,
    name: rig.name,
    timeZone: rig.timeZone,
    clock: rig.clock,
    now: rig.now?.toISOString() ?? null,
    lastContactAt: rig.lastContactAt?.toISOString() ?? null,
    silent: rig.state === "running" && quietMs > SILENT_AFTER_S * 1000,
    campaign,
    doing: rig.state === "running" ? doingOf(rig.step) : null,
    haltedAt: rig.haltedAt?.toISOString() ?? null,
    parked: rig.parked,
    takenOnBy: rig.takenOnBy,
    next: rig.next,
  };
}

function doingOf(step: RigRow["step"]): string | null {
  if (!step) return null;
  if (step.kind !== "measure") return step.label;
  return `${step.liquid ?? "Air"}, repeat ${formatCount(step.stored)} of ${formatCount(step.repeats ?? 0)}`;
}
