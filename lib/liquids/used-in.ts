import { z } from "zod";
import type { HoldReason } from "@/lib/campaigns/open-hold";
import type { CampaignState } from "@/lib/campaigns/schema";
import { stateWord } from "@/lib/campaigns/state-word";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import type { UsedInAnswer } from "@/lib/liquids/schema";
import type { Definition } from "@/lib/protocol/schema";
import { visitBlocks } from "@/lib/protocol/visit-blocks";

type UsedInRow = Omit<UsedInAnswer, "word" | "setPointsC" | "f0"> & { state: CampaignState; holds: HoldReason[]; measuredC: number[]; definition: Definition; f0Hz: number | null; f0U: number | null };

const OPEN: readonly CampaignState[] = ["queued", "running", "held"];

/** Campaigns that have a lot of the liquid bound to a slot, newest first: how often it was filled, what it used, and the newest f0 in it. @throws AppError 404. */
export async function findUsedIn({ liquidId, limit, cursor }: { liquidId: string; limit: number; cursor?: string }): Promise<Page<UsedInAnswer>> {
  if (!(await row("select 1 from liquid where id = $1", [liquidId]))) throw notFound("liquid");
  const [id, slot] = readCursor(cursor, z.tuple([idSchema, z.string()])) ?? [null, null];
  const found = await rows<UsedInRow>(
    `select c.id as "campaignId", c.name, c.state, cs.slot, lot.id as "lotId", lot.code as "lotCode", v.definition,
            array(select distinct h.reason from hold h where h.campaign_id = c.id and h.released_at is null order by 1) as holds,
            used.fills, used.ml as "usedMl", last.f0_mean as "f0Hz", last.f0_u as "f0U",
            array(select distinct p.set_point_c from phase p where p.campaign_id = c.id and p.medium = cs.slot and p.set_point_c is not null order by 1) as "measuredC"
       from campaign_slot cs join lot on lot.id = cs.lot_id join campaign c on c.id = cs.campaign_id join protocol_version v on v.id = c.protocol_version_id
       left join lateral (
         select (count(*) filter (where s.kind = 'fill'))::int as fills,
                coalesce(sum((s.params->>'volumeMl')::float8 * coalesce((s.params->>'times')::int, 1)), 0) as ml
           from step s where s.campaign_id = c.id and s.slot = cs.slot and s.kind in ('fill', 'rinse') and s.state = 'done') used on true
       left join lateral (
         select su.f0_mean, su.f0_u from phase p join phase_summary su on su.phase_id = p.id join fit_run r on r.id = su.fit_run_id and r.current
          where p.campaign_id = c.id and p.medium = cs.slot and su.f0_mean is not null order by p.sequence desc limit 1) last on true
      where lot.liquid_id = $1 and ($2::bigint is null or (c.id, cs.slot) < ($2, $3::text))
      order by c.id desc, cs.slot desc limit $4`,
    [liquidId, id, slot, limit + 1],
  );
  const { items, nextCursor } = cutPage(found, limit, (used) => [used.campaignId, used.slot]);
  return { items: items.map(present), nextCursor };
}

function present({ state, holds, measuredC, definition, f0Hz, f0U, ...used }: UsedInRow): UsedInAnswer {
  const setPointsC = OPEN.includes(state) ? [...new Set([...measuredC, ...setPointsOf(definition)])].toSorted((a, b) => a - b) : measuredC;
  return { ...used, state, word: stateWord(state, holds), setPointsC, f0: f0Hz === null ? null : { mean: f0Hz, u: f0U } };
}

/** Temperatures that a protocol settles at. */
function setPointsOf(definition: Definition): number[] {
  const temperatures: number[] = [];
  visitBlocks(definition, (block) => {
    if (block.kind === "settle" && block.temperatureC !== "each") temperatures.push(block.temperatureC);
    if (block.kind === "forEach" && "temperaturesC" in block.over) temperatures.push(...block.over.temperaturesC);
  });
  return temperatures;
}
