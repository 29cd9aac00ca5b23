import type { CampaignAnswer, CampaignItem, CampaignQuery } from "@/lib/campaigns/answers";
import { CAMPAIGNS, CAMPAIGNS_FROM } from "@/lib/campaigns/campaigns-query";
import { campaignWhere } from "@/lib/campaigns/filter";
import { importedLiquids } from "@/lib/campaigns/imported-liquids";
import { orderOf } from "@/lib/campaigns/order";
import { iso, presentCampaign, type CampaignRecord } from "@/lib/campaigns/present";
import { slotLiquids } from "@/lib/campaigns/slot-liquids";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";

/** Campaigns, the newest first unless asked otherwise; filtered by state, rig, sensor, protocol and words. */
export async function findCampaigns({ query, now }: { query: CampaignQuery; now: Date }): Promise<Page<CampaignItem>> {
  const { where, bind } = campaignWhere(query, 4);
  const order = orderOf(query.sort, { key: "$2", id: "$3" });
  const [key, id] = readCursor(query.cursor, order.cursor) ?? [null, null];
  const found = await rows<CampaignRecord & { sortKey: string }>(
    `${CAMPAIGNS}, ${order.key} as "sortKey" ${CAMPAIGNS_FROM} where ${where} and ${order.beyond} order by ${order.orderBy} limit ${query.limit + 1}`,
    [now, key, id, ...bind],
  );
  const { items, nextCursor } = cutPage(found, query.limit, (campaign) => [campaign.sortKey, campaign.id]);
  return { items: items.map(presentCampaign), nextCursor };
}

/** @throws AppError 404 when there is none. */
export async function getCampaign({ campaignId, now }: { campaignId: string; now: Date }): Promise<CampaignAnswer> {
  const found = await row<CampaignRecord>(`${CAMPAIGNS} ${CAMPAIGNS_FROM} where c.id = $2`, [now, campaignId]);
  if (!found) throw notFound("campaign");
  const [holds, amendments, slots, phases, step] = await Promise.all([
    readHolds(campaignId),
    readAmendments(campaignId),
    slotLiquids([campaignId]),
    rows<{ medium: string; repeats: number; setPointC: number | null }>(
      `select p.medium, p.set_point_c as "setPointC", sum(s.stored)::int as repeats from phase p join step s on s.id = p.step_id
        where p.campaign_id = $1 group by 1, 2 order by min(p.sequence)`,
      [campaignId],
    ),
    row<{ sequence: number; kind: string; label: string; state: string; medium: string | null; stored: number; repeats: number | null; dueAt: Date | null }>(
      `select sequence, kind, label, state, coalesce(medium, slot) as medium, stored, (params->>'repeats')::int as repeats, due_at as "dueAt" from step
        where campaign_id = $1 and state in ('ready', 'out')`,
      [campaignId],
    ),
  ]);
  return {
    ...presentCampaign(found),
    createdBy: found.createdBy,
    endText: found.endText,
    parking: found.parking,
    holds,
    amendments,
    slots: slots.map(({ slot, port, lotId, lot, liquidId, name, letter }) => ({ slot, port, lotId, lot, liquidId, liquid: name, letter })),
    media: mediaOf(phases, found.origin === "import" ? importedLiquids([...new Set(phases.map(({ medium }) => medium))]) : slots),
    setPointsC: [...new Set(phases.flatMap(({ setPointC }) => setPointC ?? []))],
    step: step ? { ...step, dueAt: iso(step.dueAt) } : null,
    lastContactAt: iso(found.lastContactAt),
    clock: found.clock ?? "real",
    now: (found.rigNow ?? now).toISOString(),
  };
}

async function readHolds(campaignId: string): Promise<CampaignAnswer["holds"]> {
  const holds = await rows<{ id: string; reason: CampaignAnswer["holds"][number]["reason"]; by: string | null; openedAt: Date; releasedAt: Date | null; since: Date; until: Date | null; text: string }>(
    `select h.id, h.reason, p.name as by, h.opened_at as "openedAt", h.released_at as "releasedAt", coalesce(h.opened_clock, h.opened_at) as since,
            coalesce(h.released_clock, h.released_at) as until, h.text
       from hold h left join person p on p.id = h.opened_by where h.campaign_id = $1 order by h.opened_at desc, h.id desc limit 200`,
    [campaignId],
  );
  return holds.map(({ by, openedAt, releasedAt, since, until, ...hold }) => ({
    ...hold,
    ...(by ? { by } : {}),
    openedAt: openedAt.toISOString(),
    since: since.toISOString(),
    ...(releasedAt ? { releasedAt: releasedAt.toISOString() } : {}),
    ...(until ? { until: until.toISOString() } : {}),
  }));
}

async function readAmendments(campaignId: string): Promise<CampaignAnswer["amendments"]> {
  const amendments = await rows<Omit<CampaignAnswer["amendments"][number], "at"> & { at: Date }>(
    `select a.at, p.name as by, f.version as "fromVersion", t.version as "toVersion", a.from_sequence as "fromSequence", a.why
       from amendment a join person p on p.id = a.person_id join protocol_version f on f.id = a.from_version_id join protocol_version t on t.id = a.to_version_id
      where a.campaign_id = $1 order by a.id desc`,
    [campaignId],
  );
  return amendments.map(({ at, ...amendment }) => ({ ...amendment, at: at.toISOString() }));
}

/** Media in the order in which they were first measured, over all set-points. */
function mediaOf(phases: readonly { medium: string; repeats: number }[], slots: readonly { slot: string; letter: string; name: string; tint: 1 | 2 | 3 }[]): CampaignAnswer["media"] {
  const liquids = new Map(slots.map(({ slot, letter, name, tint }) => [slot, { letter, name, tint }]));
  const repeats = new Map<string, number>();
  for (const { medium, repeats: n } of phases) repeats.set(medium, (repeats.get(medium) ?? 0) + n);
  return [...repeats].map(([medium, n]) => ({ medium, repeats: n, letter: null, tint: null, name: medium === "air" ? "Air" : medium, ...liquids.get(medium) }));
}
