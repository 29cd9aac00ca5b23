import type { BackToAirAnswer } from "@/lib/analysis/schema";
import { findFitRun } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";

type Row = {
  cycle: number;
  phaseId: string;
  sequence: number;
  at: Date;
  after: string | null;
  f0Hz: number;
  u: number | null;
  q: number | null;
  qU: number | null;
  baselineHz: number | null;
  baselineQ: number | null;
  baselineComplete: boolean;
};

/** How the air reference came back after each clean: its deviation from the baseline of its mount and set-point. */
export async function readBackToAir(campaignId: string): Promise<BackToAirAnswer> {
  const fitRunId = await findFitRun(campaignId);
  const found = await rows<Row>(
    `select p.cycle, p.id as "phaseId", p.sequence, p.started_at as at, s.f0_mean as "f0Hz", s.f0_u as u, s.q_mean as q, s.q_u as "qU",
            (select before.medium from phase before where before.campaign_id = p.campaign_id and before.sequence < p.sequence and before.medium <> 'air'
              order by before.sequence desc limit 1) as after,
            b.f0_hz as "baselineHz", b.q as "baselineQ", b.complete_at is not null as "baselineComplete"
       from phase p join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2
       left join baseline b on b.campaign_id = p.campaign_id and b.mount_id = p.mount_id and b.set_point_c is not distinct from p.set_point_c
             and b.readout = p.readout and b.fit_run_id = s.fit_run_id
      where p.campaign_id = $1 and p.medium = 'air' and p.role = 'reference' and s.f0_mean is not null and p.started_at is not null
      order by p.sequence`,
    [campaignId, fitRunId ?? null],
  );
  const limits = await rows<{ ppm: number }>(
    `select (l->>'tolerancePpm')::float8 as ppm from campaign c join protocol_version v on v.id = c.protocol_version_id,
            jsonb_array_elements(v.definition->'limits') l where c.id = $1 and l->>'kind' = 'return' and l ? 'tolerancePpm'`,
    [campaignId],
  );
  return {
    baselineHz: found.at(-1)?.baselineHz ?? null,
    limitPpm: limits[0]?.ppm ?? null,
    items: found.map(({ baselineHz, baselineQ, at, ...phase }) => ({
      ...phase,
      at: at.toISOString(),
      shiftPpm: baselineHz === null ? null : (phase.f0Hz / baselineHz - 1) * 1e6,
      shiftU: baselineHz === null || phase.u === null ? null : (phase.u / baselineHz) * 1e6,
      qShiftPercent: baselineQ === null || phase.q === null ? null : (phase.q / baselineQ - 1) * 100,
    })),
  };
}
