import { campaignCode } from "@/lib/campaigns/code";
import type { HoldReason } from "@/lib/campaigns/open-hold";
import type { CampaignState } from "@/lib/campaigns/schema";
import { stateWord } from "@/lib/campaigns/state-word";
import { rows } from "@/lib/db";
import type { FindAnswer, Found, FoundKind } from "@/lib/find/schema";
import { demand, type Actor } from "@/lib/people/actor";

const TERMS_MOST = 8;

type Find = { by: Actor; q: string; limit: number };

type FoundRow = {
  kind: FoundKind;
  id: string;
  name: string;
  note: string;
  ownerId: string;
  state: CampaignState | null;
  holds: HoldReason[] | null;
  retired: boolean;
  total: number;
};

/** What can be found, by one shape: its name, its short code, the words that it is found by, and what is said beside it. */
const EVERYTHING = `
  select 'campaign' as kind, c.id, c.name, 'C-' || c.id as code, concat_ws(' ', s.serial, rig.name, p.name) as words,
         concat_ws(', ', 'C-' || c.id, s.serial, rig.name) as note, c.id as owner_id, c.state,
         (select array_agg(distinct h.reason) from hold h where h.campaign_id = c.id and h.released_at is null) as holds, false as retired
    from campaign c left join sensor s on s.id = c.sensor_id left join rig on rig.id = c.rig_id
    left join protocol_version v on v.id = c.protocol_version_id left join protocol p on p.id = v.protocol_id
  union all
  select 'sensor', s.id, s.serial, s.serial, s.kind, concat_ws(', ', s.kind, r.name), s.id, null, null, s.retired_at is not null
    from sensor s left join mount m on m.sensor_id = s.id and upper_inf(m.period) left join rig r on r.id = m.rig_id
  union all
  select 'liquid', q.id, q.name, q.letter, q.model, concat_ws(', ', 'letter ' || q.letter, case when q.model <> 'table' then q.model end), q.id, null, null, q.retired_at is not null
    from liquid q
  union all
  select 'lot', lot.id, q.name || ' ' || lot.code, lot.code, '', 'lot of ' || q.name, q.id, null, null, q.retired_at is not null
    from lot join liquid q on q.id = lot.liquid_id
  union all
  select 'rig', rig.id, rig.name, rig.name, '', rig.time_zone, rig.id, null, null, rig.retired_at is not null from rig
  union all
  select 'protocol', p.id, p.name, p.name, '', coalesce('version ' || max(v.version), 'draft only'), p.id, null, null, p.retired_at is not null
    from protocol p left join protocol_version v on v.protocol_id = p.id group by p.id`;

/** The best of each kind, so that many campaigns do not hide the one sensor; the digits alone name a campaign too. */
const RANKED = `
  with hit as (
    select e.*, case
             when lower(e.name) = $1 or lower(e.code) = $1 then 0
             when e.kind = 'campaign' and e.id::text = $1 then 1
             when starts_with(lower(e.name), $1) or starts_with(lower(e.code), $1) then 2
             when strpos(' ' || lower(e.name), ' ' || $1) > 0 then 3
             when strpos(lower(e.name), $1) > 0 then 4
             else 5 end as rank
      from (${EVERYTHING}) e
     where not exists (select 1 from unnest($2::text[]) term where strpos(lower(concat_ws(' ', e.name, e.code, e.words)), term) = 0)),
  placed as (
    select hit.*, row_number() over (partition by kind order by rank, retired, id desc) as place, count(*) over (partition by kind)::int as total from hit)
  select kind, id, name, note, owner_id as "ownerId", state, holds, retired, total from placed
   where place <= $3 order by rank, retired, array_position(array['campaign', 'sensor', 'liquid', 'lot', 'rig', 'protocol'], kind), id desc`;

/**
 * Campaigns, sensors, liquids, lots, rigs and protocols that hold every one of the words, best first, in one query. People
 * and tokens are never found here: the answer is for every role.
 */
export async function find({ by, q, limit }: Find): Promise<FindAnswer> {
  demand(by, "read");
  const phrase = q.replaceAll(/[\p{Cc}\p{Cs}]/gu, " ").trim().toLowerCase().split(/\s+/).join(" ");
  const terms = phrase.split(" ").slice(0, TERMS_MOST);
  if (phrase === "") return { items: [], totals: {} };
  const found = await rows<FoundRow>(RANKED, [phrase, terms, limit]);
  return { items: found.map(present), totals: Object.fromEntries(found.map(({ kind, total }) => [kind, total])) };
}

const present = ({ kind, id, name, note, ownerId, state, holds, retired }: FoundRow): Found => ({
  kind,
  id,
  name,
  note: [note, state && stateWord(state, holds ?? []), retired && "retired"].filter(Boolean).join(", "),
  href: HREFS[kind](ownerId),
  retired,
});

const HREFS: Record<FoundKind, (id: string) => string> = {
  campaign: (id) => `/campaigns/${campaignCode(id)}`,
  sensor: (id) => `/sensors/${id}`,
  liquid: (id) => `/liquids/${id}`,
  lot: (id) => `/liquids/${id}`,
  rig: (id) => `/rigs/${id}`,
  protocol: (id) => `/protocols/${id}`,
};
