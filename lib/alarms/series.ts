import type { AlarmAnswer, AlarmSeries } from "@/lib/alarms/schema";
import { row, rows } from "@/lib/db";
import type { Limit } from "@/lib/protocol/schema";

const MOST_POINTS = 120;

type Watched = { campaignId: string; medium: string; role: string; mountId: string | null; setPointC: number | null; fitRunId: string | null; sequence: number; name: string; limit: Limit | null };
type Like = { at: Date; f0Hz: number; q: number; unusable: number; n: number; baselineF0: number | null; baselineQ: number | null };

/** The values that led to an alarm of a limit over phases, in the limit's unit; undefined where there is nothing to draw. */
export async function readSeries(alarm: AlarmAnswer): Promise<AlarmSeries | undefined> {
  if (!alarm.phaseId || alarm.limit === undefined || alarm.unit === undefined) return undefined;
  const phase = await row<Watched>(
    `select p.campaign_id as "campaignId", p.medium, p.role, p.mount_id as "mountId", p.set_point_c as "setPointC", a.fit_run_id as "fitRunId",
            p.sequence, coalesce(liquid.name, p.medium) as name,
            (select one from jsonb_array_elements(v.definition->'limits') one where one->>'id' = a.limit_id) as "limit"
       from alarm a join phase p on p.id = a.phase_id join step on step.id = p.step_id join protocol_version v on v.id = step.protocol_version_id
       left join liquid on liquid.id = p.liquid_id where a.id = $1`,
    [alarm.id],
  );
  if (!phase?.limit) return undefined;
  if (phase.limit.kind === "temperature") return temperatures(alarm.phaseId, phase.limit);
  const like = (await phasesLike(phase)).slice(-MOST_POINTS);
  const valueOf = valueIn(phase.limit, alarm.unit, like);
  if (!valueOf) return undefined;
  const points = like.flatMap((one) => {
    const value = valueOf(one);
    return Number.isFinite(value) ? [{ at: one.at.toISOString(), value }] : [];
  });
  const oneSided = alarm.kind === "fit";
  const bounded = alarm.kind === "fit" || alarm.kind === "return";
  return {
    label: phase.medium === "air" ? "Air reference" : phase.name,
    unit: alarm.kind === "drift" ? "ppm" : alarm.unit,
    ...(bounded ? { high: alarm.limit, ...(oneSided ? {} : { low: -alarm.limit }) } : {}),
    points,
  };
}

const phasesLike = ({ campaignId, fitRunId, medium, role, mountId, setPointC, sequence }: Watched) =>
  rows<Like>(
    `select p.started_at as at, s.f0_mean as "f0Hz", s.q_mean as q, s.unusable, s.n, b.f0_hz as "baselineF0", b.q as "baselineQ"
       from phase p join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2
       left join baseline b on b.campaign_id = p.campaign_id and b.mount_id = p.mount_id and b.set_point_c is not distinct from p.set_point_c
                           and b.readout = p.readout and b.fit_run_id = s.fit_run_id
      where p.campaign_id = $1 and p.medium = $3 and p.role = $4 and p.mount_id is not distinct from $5 and p.set_point_c is not distinct from $6
        and p.sequence <= $7 and p.started_at is not null order by p.sequence`,
    [campaignId, fitRunId, medium, role, mountId, setPointC, sequence],
  );

/** A phase's value as the limit sees it: off the baseline, off the first phase, or the share of fits left out. */
function valueIn(limit: Limit, unit: string, like: readonly Like[]): ((phase: Like) => number) | undefined {
  if (limit.kind === "return") {
    return unit === "%" ? ({ q, baselineQ }) => (q / (baselineQ ?? NaN) - 1) * 100 : ({ f0Hz, baselineF0 }) => (f0Hz / (baselineF0 ?? NaN) - 1) * 1e6;
  }
  if (limit.kind === "fit") return ({ unusable, n }) => (n > 0 ? (unusable / n) * 100 : NaN);
  if (limit.kind !== "drift" || like.length === 0) return undefined;
  const [first] = like;
  return limit.quantity === "q" ? ({ q }) => (q / first.q - 1) * 1e6 : ({ f0Hz }) => (f0Hz / first.f0Hz - 1) * 1e6;
}

/** The whole phase in at most so many parts; of each the reading that is nearest to or farthest beyond the range. */
async function temperatures(phaseId: string, { minC, maxC }: Extract<Limit, { kind: "temperature" }>): Promise<AlarmSeries> {
  const found = await rows<{ at: Date; low: number; high: number }>(
    `select min(at) as at, min(temperature_c) as low, max(temperature_c) as high
       from (select r.at, r.temperature_c, ntile($2) over (order by r.idx) as part
               from reading r join phase p on p.step_id = r.step_id where p.id = $1 and r.temperature_c is not null) parts
      group by part order by part`,
    [phaseId, MOST_POINTS],
  );
  const farther = ({ low, high }: { low: number; high: number }) => (maxC - high < low - minC ? high : low);
  return { label: "Cell", unit: "°C", low: minC, high: maxC, points: found.map((part) => ({ at: part.at.toISOString(), value: farther(part) })) };
}
