import type { StripAnswer, StripSegment } from "@/lib/campaigns/strip-schema";
import { rows, row } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { forecast, type Segment } from "@/lib/protocol/forecast";
import type { Definition } from "@/lib/protocol/schema";
import { trackKey, type Cursor, type RigAbilities } from "@/lib/protocol/types";

const MOST_PLANNED = 400;

type Head = {
  state: string;
  definition: Definition;
  cursor: Cursor | null;
  startedClock: Date | null;
  endedClock: Date | null;
  clock: Date | null;
  timeZone: string;
  abilities: RigAbilities | null;
  nominalF0Hz: number;
  nominalQ: number;
  mountId: string | null;
};

/** A campaign's run as the strip draws it: what was done, what is planned, where it halted, how the air reference moved. */
export async function readStrip({ campaignId, now }: { campaignId: string; now: Date }): Promise<StripAnswer> {
  const head = await row<Head>(
    `select c.state, v.definition, c.cursor, c.started_clock as "startedClock", c.ended_clock as "endedClock", c.mount_id as "mountId",
            case when rig.clock = 'simulated' then rig.reported_clock else $2::timestamptz end as clock, rig.time_zone as "timeZone", rig.abilities,
            s.nominal_f0_hz as "nominalF0Hz", s.nominal_q as "nominalQ"
       from campaign c join protocol_version v on v.id = c.protocol_version_id join rig on rig.id = c.rig_id join sensor s on s.id = c.sensor_id
      where c.id = $1`,
    [campaignId, now],
  );
  if (!head) throw notFound("campaign with a protocol");
  const clock = head.endedClock ?? head.clock ?? now;
  const [past, holds, trace, tracks] = await Promise.all([
    pastSteps(campaignId),
    rows<{ reason: string; from: Date; to: Date | null }>(
      `select reason, coalesce(opened_clock, opened_at) as "from", case when released_at is not null then coalesce(released_clock, released_at) end as "to"
         from hold where campaign_id = $1 order by opened_at`,
      [campaignId],
    ),
    readTrace(campaignId),
    rows<{ medium: string; setPointC: number | null; f0Hz: number; q: number }>(
      `select medium, set_point_c as "setPointC", f0_hz as "f0Hz", q from track where mount_id = $1`,
      [head.mountId],
    ),
  ]);
  const segments = past.map((step) => pastSegment(step, clock));
  for (const { from, to } of holds) {
    segments.push({ kind: "held", from: from.toISOString(), to: (to ?? clock).toISOString(), cycle: 0, label: "Held" });
  }
  const running = head.state === "running" || head.state === "held" || head.state === "queued";
  const planned = running && head.cursor && head.abilities ? plannedSegments(head, head.cursor, head.abilities, clock, past.at(-1), tracks) : [];
  segments.push(...planned);
  segments.sort((a, b) => Date.parse(a.from) - Date.parse(b.from));
  const last = segments.reduce((latest, { to }) => Math.max(latest, Date.parse(to)), clock.getTime());
  if (!running && head.endedClock) segments.push({ kind: "end", from: head.endedClock.toISOString(), to: head.endedClock.toISOString(), cycle: 0, label: "End" });
  const halted = holds.filter(({ reason }) => reason === "limit" || reason === "failure" || reason === "silence").at(-1);
  const limit = head.definition.limits.find(({ kind }) => kind === "return");
  return {
    from: (head.startedClock ?? clock).toISOString(),
    to: new Date(last).toISOString(),
    now: clock.toISOString(),
    segments,
    ...(halted ? { halt: { at: halted.from.toISOString(), open: halted.to === null } } : {}),
    trace: trace.points,
    ...(limit?.kind === "return" && limit.tolerancePpm && trace.baselineHz ? { limit: limit.tolerancePpm * 1e-3 * trace.baselineHz } : {}),
  };
}

type PastStep = {
  kind: string;
  medium: string | null;
  slot: string | null;
  cycle: number;
  label: string;
  sequence: number;
  state: string;
  from: Date;
  to: Date | null;
  repeats: number | null;
  stored: number;
  phaseId: string | null;
  f0Mean: number | null;
  f0U: number | null;
};

const pastSteps = (campaignId: string) =>
  rows<PastStep>(
    `select s.kind, s.medium, s.slot, s.cycle, s.label, s.sequence, s.state, s.started_clock as "from",
            case when s.state in ('ready', 'out') then null else coalesce(s.ended_clock, p.ended_at, s.started_clock) end as "to",
            (s.params->>'repeats')::int as repeats, s.stored, p.id as "phaseId", su.f0_mean as "f0Mean", su.f0_u as "f0U"
       from step s left join phase p on p.step_id = s.id
       left join fit_run r on r.campaign_id = s.campaign_id and r.current
       left join phase_summary su on su.phase_id = p.id and su.fit_run_id = r.id
      where s.campaign_id = $1 and s.started_clock is not null and s.kind not in ('ask', 'settle') order by s.sequence`,
    [campaignId],
  );

function kindOf(kind: string, medium: string | null): StripSegment["kind"] {
  if (kind === "measure") return medium === "air" ? "air" : "liquid";
  if (kind === "fill" || kind === "dry" || kind === "wait") return kind;
  return "clean";
}

function pastSegment({ kind, medium, slot, cycle, label, from, to, repeats, stored, phaseId, f0Mean, f0U }: PastStep, clock: Date): StripSegment {
  const of = medium ?? slot;
  return {
    kind: kindOf(kind, medium),
    from: from.toISOString(),
    to: (to ?? (clock > from ? clock : from)).toISOString(),
    cycle,
    label,
    ...(of && of !== "air" ? { medium: of } : {}),
    ...(kind === "measure" ? { repeats: repeats ?? 0, taken: stored } : {}),
    ...(phaseId ? { phaseId } : {}),
    ...(f0Mean !== null ? { f0: { mean: f0Mean, u: f0U } } : {}),
  };
}

function plannedSegments(
  head: Head,
  cursor: Cursor,
  abilities: RigAbilities,
  clock: Date,
  open: PastStep | undefined,
  tracks: { medium: string; setPointC: number | null; f0Hz: number; q: number }[],
): StripSegment[] {
  const known = Object.fromEntries(tracks.map(({ medium, setPointC, f0Hz, q }) => [trackKey(medium, setPointC), { f0Hz, q }]));
  const remainsMs = open && open.to === null && open.repeats && open.stored > 0 ? ((clock.getTime() - open.from.getTime()) * (open.repeats - open.stored)) / open.stored : 0;
  const start = clock.getTime() + Math.max(0, remainsMs);
  const ahead = forecast(
    head.definition,
    cursor,
    { nowMs: start, timeZone: head.timeZone, abilities, nominal: { f0Hz: head.nominalF0Hz, q: head.nominalQ }, tracks: known },
    MOST_PLANNED,
  );
  const time = (seconds: number) => new Date(start + seconds * 1000).toISOString();
  const rest: StripSegment[] = remainsMs > 0 && open ? [{ ...pastSegment(open, clock), from: clock.toISOString(), to: time(0), planned: true }] : [];
  return [...rest, ...ahead.filter(({ kind }) => kind !== "ask" && kind !== "settle").map((segment) => planned(segment, time))];
}

function planned({ kind, medium, slot, cycle, label, startS, durationS }: Segment, time: (seconds: number) => string): StripSegment {
  const of = medium ?? slot;
  return {
    kind: kindOf(kind, medium ?? null),
    from: time(startS),
    to: time(startS + durationS),
    planned: true,
    cycle,
    label,
    ...(of && of !== "air" ? { medium: of } : {}),
  };
}

/** Air references against the baseline, or against the first while there is none. */
async function readTrace(campaignId: string): Promise<{ points: StripAnswer["trace"]; baselineHz: number | null }> {
  const references = await rows<{ at: Date; f0: number; u: number | null; baselineHz: number | null }>(
    `select p.started_at as at, s.f0_mean as f0, s.f0_u as u, b.f0_hz as "baselineHz"
       from phase p join fit_run r on r.campaign_id = p.campaign_id and r.current join phase_summary s on s.phase_id = p.id and s.fit_run_id = r.id
       left join baseline b on b.campaign_id = p.campaign_id and b.mount_id = p.mount_id and b.set_point_c is not distinct from p.set_point_c
             and b.readout = p.readout and b.fit_run_id = r.id
      where p.campaign_id = $1 and p.medium = 'air' and p.role = 'reference' and s.f0_mean is not null and p.started_at is not null order by p.sequence`,
    [campaignId],
  );
  const points = references.map(({ at, f0, u, baselineHz }) => ({
    at: at.toISOString(),
    value: (f0 - (baselineHz ?? references[0].f0)) * 1000,
    ...(u === null ? {} : { u: u * 1000 }),
  }));
  return { points, baselineHz: references[0]?.baselineHz ?? references[0]?.f0 ?? null };
}
