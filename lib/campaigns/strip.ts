import { importedLiquids } from "@/lib/campaigns/imported-liquids";
import { slotLiquids, type SlotLiquid } from "@/lib/campaigns/slot-liquids";
import { pastSegment, readPastSteps, type PastStep } from "@/lib/campaigns/strip-past";
import { plannedSegments, type Track } from "@/lib/campaigns/strip-planned";
import type { StripAnswer, StripSegment, StripsAnswer } from "@/lib/campaigns/strip-schema";
import { rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { readAirReturns, type AirReturn } from "@/lib/phases/air-returns";
import { start } from "@/lib/protocol/interpreter";
import type { Definition } from "@/lib/protocol/schema";
import type { Cursor, RigAbilities } from "@/lib/protocol/types";

type Head = {
  id: string;
  origin: "protocol" | "import";
  state: "draft" | "queued" | "running" | "held" | "finished" | "stopped" | "failed";
  definition: Definition | null;
  cursor: Cursor | null;
  startedClock: Date | null;
  endedClock: Date | null;
  clock: Date | null;
  timeZone: string | null;
  abilities: RigAbilities | null;
  nominalF0Hz: number | null;
  nominalQ: number | null;
};

type HoldRow = { campaignId: string; reason: string; from: Date; to: Date | null };

type Parts = { past: readonly PastStep[]; holds: readonly HoldRow[]; air: readonly AirReturn[]; tracks: readonly Track[]; liquids: readonly SlotLiquid[] };

/** A campaign's run as the strip draws it. @throws AppError 404 when there is none. */
export async function readStrip({ campaignId, now }: { campaignId: string; now: Date }): Promise<StripAnswer> {
  const { items } = await readStrips({ campaignIds: [campaignId], now });
  if (!items[0]) throw notFound("campaign");
  return items[0].strip;
}

/** What was done, what is planned, where it halted and how the air reference moved, in six queries however many campaigns there are. */
export async function readStrips({ campaignIds, now }: { campaignIds: readonly string[]; now: Date }): Promise<StripsAnswer> {
  const [heads, past, holds, air, tracks, liquids] = await Promise.all([
    readHeads(campaignIds, now),
    readPastSteps(campaignIds),
    rows<HoldRow>(
      `select campaign_id as "campaignId", reason, coalesce(opened_clock, opened_at) as "from",
              case when released_at is not null then coalesce(released_clock, released_at) end as "to"
         from hold where campaign_id = any($1::bigint[]) order by opened_at, id`,
      [campaignIds],
    ),
    readAirReturns(campaignIds),
    rows<Track & { campaignId: string }>(
      `select c.id as "campaignId", t.medium, t.set_point_c as "setPointC", t.f0_hz as "f0Hz", t.q from campaign c join track t on t.mount_id = c.mount_id where c.id = any($1::bigint[])`,
      [campaignIds],
    ),
    slotLiquids(campaignIds),
  ]);
  const [pastOf, holdsOf, airOf, tracksOf, liquidsOf] = [byCampaign(past), byCampaign(holds), byCampaign(air), byCampaign(tracks), byCampaign(liquids)];
  return {
    items: heads.map((head) => ({
      campaignId: head.id,
      strip: stripOf(head, now, { past: pastOf(head.id), holds: holdsOf(head.id), air: airOf(head.id), tracks: tracksOf(head.id), liquids: liquidsOf(head.id) }),
    })),
  };
}

function byCampaign<Part extends { campaignId: string }>(parts: readonly Part[]): (campaignId: string) => readonly Part[] {
  const groups = new Map<string, Part[]>();
  for (const part of parts) {
    const group = groups.get(part.campaignId);
    if (group) group.push(part);
    else groups.set(part.campaignId, [part]);
  }
  return (campaignId) => groups.get(campaignId) ?? [];
}

const readHeads = (campaignIds: readonly string[], now: Date) =>
  rows<Head>(
    `select c.id, c.origin, c.state, v.definition, c.cursor, c.started_clock as "startedClock", c.ended_clock as "endedClock",
            case when rig.clock = 'simulated' then rig.reported_clock else $2::timestamptz end as clock, rig.time_zone as "timeZone", rig.abilities,
            s.nominal_f0_hz as "nominalF0Hz", s.nominal_q as "nominalQ"
       from campaign c left join protocol_version v on v.id = c.protocol_version_id left join rig on rig.id = c.rig_id left join sensor s on s.id = c.sensor_id
      where c.id = any($1::bigint[])`,
    [campaignIds, now],
  );

function stripOf(head: Head, now: Date, { past, holds, air, tracks, liquids }: Parts): StripAnswer {
  const clock = head.endedClock ?? head.clock ?? now;
  const begun = head.startedClock !== null;
  const ended = head.state === "finished" || head.state === "stopped" || head.state === "failed";
  const segments: StripSegment[] = past.map((step) => pastSegment(step, clock));
  for (const { from, to } of holds) segments.push({ kind: "held", from: from.toISOString(), to: (to ?? clock).toISOString(), cycle: 0, label: "Held" });
  segments.push(...(ended ? [] : planOf(head, clock, past.at(-1), tracks)));
  segments.sort((a, b) => Date.parse(a.from) - Date.parse(b.from));
  if (ended && head.endedClock) segments.push({ kind: "end", from: clock.toISOString(), to: clock.toISOString(), cycle: 0, label: "End" });

  const from = head.startedClock ?? past[0]?.from ?? clock;
  const last = segments.reduce((latest, { to }) => Math.max(latest, Date.parse(to)), begun ? clock.getTime() : 0);
  const halted = holds.findLast(({ reason }) => reason === "limit" || reason === "failure" || reason === "silence");
  const limit = head.definition?.limits.find((one) => one.kind === "return" && one.tolerancePpm !== undefined);
  const baselineHz = air[0]?.baselineHz ?? air[0]?.f0Hz;
  return {
    from: from.toISOString(),
    to: new Date(Math.max(last, from.getTime() + 60_000)).toISOString(),
    ...(begun && !ended ? { now: clock.toISOString() } : {}),
    segments,
    liquids: (head.origin === "import" ? importedLiquids([...new Set(past.flatMap(({ medium }) => medium ?? []))]) : liquids).map(({ slot, name, letter, tint }) => ({ slot, name, letter, tint })),
    ...(halted ? { halt: { at: halted.from.toISOString(), open: halted.to === null } } : {}),
    trace: air.map(({ at, phaseId, f0Hz, u, shiftU, baselineHz: baseline }) => ({
      at: at.toISOString(),
      phaseId,
      value: (f0Hz - (baseline ?? air[0].f0Hz)) * 1000,
      ...((shiftU ?? u) === null ? {} : { u: ((shiftU ?? u) as number) * 1000 }),
    })),
    ...(limit?.kind === "return" && limit.tolerancePpm && baselineHz ? { limit: limit.tolerancePpm * 1e-3 * baselineHz } : {}),
  };
}

function planOf({ definition, abilities, cursor, timeZone, nominalF0Hz, nominalQ }: Head, clock: Date, last: PastStep | undefined, tracks: readonly Track[]): StripSegment[] {
  if (!definition || !abilities || nominalF0Hz === null || nominalQ === null) return [];
  return plannedSegments({ definition, cursor: cursor ?? start(definition), abilities, timeZone: timeZone ?? "UTC", nominal: { f0Hz: nominalF0Hz, q: nominalQ }, tracks, clock, last });
}
