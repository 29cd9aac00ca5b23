import { campaignQuery, type CampaignItem } from "@/lib/campaigns/answers";
import { findCampaigns } from "@/lib/campaigns/read";
import { slotLiquids, type SlotLiquid } from "@/lib/campaigns/slot-liquids";
import { stateWord } from "@/lib/campaigns/state-word";
import { readStrips } from "@/lib/campaigns/strip";
import type { StripAnswer } from "@/lib/campaigns/strip-schema";
import { readBlocked, readLaneRigs, readOpenCampaigns, type BlockedRow, type LaneRig, type OpenCampaign } from "@/lib/rigs/lane-rows";
import { laneSegments } from "@/lib/rigs/lane-segments";
import { placeInLine, type Expected, type Placed } from "@/lib/rigs/line";
import { segmentsFrom, stillToCome } from "@/lib/rigs/plan-ahead";
import type { LaneAnswer, LaneCampaign, TimelineAnswer } from "@/lib/rigs/timeline-schema";

const DAY_MS = 86_400_000;
const BACK_MS = 7.5 * DAY_MS;
const AHEAD_MS = 27.5 * DAY_MS;

/** A campaign that is being put together, to be seen in its rig's line. */
export type Draft = { campaign: OpenCampaign; liquids: readonly SlotLiquid[] };

type Ask = { now: Date; rigId?: string; draft?: Draft };

/** Five weeks of each rig in use: what is on it and what waits for it, each with its likely end, and when it is blocked. */
export async function readTimeline({ now, rigId, draft }: Ask): Promise<TimelineAnswer> {
  const rigs = await readLaneRigs(rigId, now);
  const rigIds = rigs.map(({ id }) => id);
  const open = await readOpenCampaigns(rigIds);
  const onRigs = open.filter(({ state }) => state !== "queued").map(({ id }) => id);
  const [items, strips, liquids, blocked] = await Promise.all([
    findCampaigns({ query: campaignQuery.parse({ state: "on-rigs", limit: 200, rigId }), now }),
    readStrips({ campaignIds: onRigs, now }),
    slotLiquids(open.map(({ id }) => id)),
    readBlocked(rigIds, new Date(Math.min(now.getTime(), ...rigs.map((rig) => (rig.now ?? now).getTime())) - BACK_MS)),
  ]);
  const itemOf = new Map(items.items.map((item) => [item.id, item]));
  const stripOf = new Map(strips.items.map(({ campaignId, strip }) => [campaignId, strip]));
  return {
    items: rigs.map((rig) =>
      lane({
        rig,
        nowMs: (rig.now ?? now).getTime(),
        open: inLine(open.filter((campaign) => campaign.rigId === rig.id), draft),
        blocked: blocked.filter((window) => window.rigId === rig.id),
        liquids: [...liquids, ...(draft?.liquids ?? [])],
        itemOf,
        stripOf,
      }),
    ),
  };
}

/** The draft stands behind all that have its priority or a higher one: they have waited longer. */
function inLine(open: OpenCampaign[], draft: Draft | undefined): OpenCampaign[] {
  if (!draft) return open;
  const place = open.findIndex(({ state, priority }) => state === "queued" && priority < draft.campaign.priority);
  return open.toSpliced(place < 0 ? open.length : place, 0, draft.campaign);
}

type Parts = {
  rig: LaneRig;
  nowMs: number;
  open: readonly OpenCampaign[];
  blocked: readonly BlockedRow[];
  liquids: readonly SlotLiquid[];
  itemOf: ReadonlyMap<string, CampaignItem>;
  stripOf: ReadonlyMap<string, StripAnswer>;
};

function lane({ rig, nowMs, open, blocked, liquids, itemOf, stripOf }: Parts): LaneAnswer {
  const window = { fromMs: nowMs - BACK_MS, toMs: nowMs + AHEAD_MS };
  const still = new Map(open.map((campaign) => [campaign.id, stillToCome(campaign, rig, nowMs)]));
  const liquidsOf = (id: string) => liquids.filter(({ campaignId }) => campaignId === id);
  const occupying = open.find(({ state }) => state !== "queued");
  const queued = open.filter(({ state }) => state === "queued");
  const end = occupying && endOf(occupying, itemOf.get(occupying.id), stripOf.get(occupying.id), nowMs);
  const free: Expected = end ?? { at: nowMs, earliest: nowMs, latest: nowMs };
  const placed = placeInLine({
    free,
    waiting: queued.map((campaign) => ({ id: campaign.id, startAt: campaign.startAt?.getTime() ?? null, ...takes(campaign, still.get(campaign.id)?.seconds ?? 0) })),
    blocked: blocked.map(({ from, to }) => ({ from: from.getTime(), to: to.getTime() })),
  });
  const isKnown = occupying?.state !== "held";

  const campaigns: LaneCampaign[] = [];
  if (occupying && end) {
    const strip = stripOf.get(occupying.id);
    const segments = laneSegments({ segments: strip?.segments.filter(({ kind }) => kind !== "end") ?? [], endMs: end.at, ...window, isCut: still.get(occupying.id)?.isCut ?? false });
    campaigns.push(present(occupying, { id: occupying.id, from: (occupying.startedClock ?? new Date(nowMs)).getTime(), end }, itemOf.get(occupying.id)?.word, isKnown, { segments, liquids: strip?.liquids ?? [], halt: strip?.halt }));
  }
  for (const place of placed) {
    const campaign = queued.find(({ id }) => id === place.id);
    if (!campaign) continue;
    const isShown = place.from < window.toMs;
    const segments = isShown ? laneSegments({ segments: segmentsFrom(campaign, rig, place.from), endMs: place.end.at, ...window, isCut: still.get(campaign.id)?.isCut ?? false }) : [];
    campaigns.push(present(campaign, place, undefined, isKnown, { segments, liquids: liquidsOf(campaign.id).map(({ slot, name, letter, tint }) => ({ slot, name, letter, tint })) }));
  }
  const last = placed.at(-1)?.end.at ?? free.at;
  return {
    rigId: rig.id,
    name: rig.name,
    timeZone: rig.timeZone,
    now: iso(nowMs),
    from: iso(window.fromMs),
    to: iso(window.toMs),
    campaigns,
    blocked: blocked.filter(({ from, to }) => from.getTime() < window.toMs && to.getTime() > window.fromMs).map(({ id, from, to, why }) => ({ id, from: from.toISOString(), to: to.toISOString(), why })),
    freeFrom: isKnown ? iso(last) : null,
    needs: needsOf(open, still, liquids),
  };
}

/** When the campaign on the rig ends: as its pace says, or, while it is held, as its plan says if it went on now. */
function endOf({ state }: OpenCampaign, item: CampaignItem | undefined, strip: StripAnswer | undefined, nowMs: number): Expected {
  const time = (at: string) => Math.max(nowMs, Date.parse(at));
  if (item?.expectedEnd) return { at: time(item.expectedEnd.at), earliest: time(item.expectedEnd.earliest), latest: time(item.expectedEnd.latest) };
  const at = state === "running" || state === "held" ? time(strip?.to ?? iso(nowMs)) : nowMs;
  return { at, earliest: at, latest: at };
}

function takes({ planned }: OpenCampaign, likelyS: number) {
  return planned ? { seconds: planned.seconds, lowS: planned.lowS, highS: planned.highS } : { seconds: likelyS, lowS: likelyS, highS: likelyS };
}

function present(campaign: OpenCampaign, { id, from, end }: Placed, word: string | undefined, isKnown: boolean, strip: LaneCampaign["strip"]): LaneCampaign {
  const queued = campaign.state === "queued";
  return {
    id,
    name: campaign.name,
    sensor: campaign.sensor,
    word: word ?? stateWord(campaign.state, campaign.holds),
    queued,
    startAt: campaign.startAt?.toISOString() ?? null,
    ...takes(campaign, (end.at - from) / 1000),
    from: iso(from),
    end: { at: iso(end.at), range: isKnown ? { earliest: iso(end.earliest), latest: iso(end.latest) } : null },
    strip,
  };
}

function needsOf(open: readonly OpenCampaign[], still: ReadonlyMap<string, { mlPerSlot: ReadonlyMap<string, number> }>, liquids: readonly SlotLiquid[]): LaneAnswer["needs"] {
  const ports = new Map<number, { ml: number; inLineMl: number }>();
  const needs = { wasteMl: 0, inLineWasteMl: 0 };
  for (const { id, state } of open) {
    for (const [slot, ml] of still.get(id)?.mlPerSlot ?? []) {
      if (state === "queued") needs.inLineWasteMl += ml;
      else needs.wasteMl += ml;
      const port = liquids.find((liquid) => liquid.campaignId === id && liquid.slot === slot)?.port;
      if (port === undefined) continue;
      const of = ports.get(port) ?? { ml: 0, inLineMl: 0 };
      ports.set(port, state === "queued" ? { ...of, inLineMl: of.inLineMl + ml } : { ...of, ml: of.ml + ml });
    }
  }
  return { ports: [...ports].map(([port, ml]) => ({ port, ...ml })), ...needs };
}

const iso = (ms: number) => new Date(ms).toISOString();
