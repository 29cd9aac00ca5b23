import { rows } from "@/lib/db";
import { SHIFT_U } from "@/lib/phases/shift-uncertainty";

/** An air reference of a campaign, and how far it stands from the baseline of its mount and set-point. */
export type AirReturn = {
  campaignId: string;
  cycle: number;
  phaseId: string;
  sequence: number;
  at: Date;
  f0Hz: number;
  u: number | null;
  q: number | null;
  qU: number | null;
  baselineHz: number | null;
  baselineQ: number | null;
  baselineComplete: boolean;
  shiftU: number | null;
};

/** Air references with a value by the current fit run, in the order in which they were measured, of all campaigns asked for. */
export function readAirReturns(campaignIds: readonly string[]): Promise<AirReturn[]> {
  return rows<AirReturn>(
    `select ph.campaign_id as "campaignId", ph.cycle, ph.id as "phaseId", ph.sequence, ph.started_at as at, su.f0_mean as "f0Hz", su.f0_u as u, su.q_mean as q, su.q_u as "qU",
            b.f0_hz as "baselineHz", b.q as "baselineQ", b.complete_at is not null as "baselineComplete", ${SHIFT_U} as "shiftU"
       from phase ph join fit_run r on r.campaign_id = ph.campaign_id and r.current join phase_summary su on su.phase_id = ph.id and su.fit_run_id = r.id
       left join baseline b on b.campaign_id = ph.campaign_id and b.mount_id = ph.mount_id and b.set_point_c is not distinct from ph.set_point_c
             and b.readout = ph.readout and b.fit_run_id = r.id
      where ph.campaign_id = any($1::bigint[]) and ph.medium = 'air' and ph.role = 'reference' and su.f0_mean is not null and ph.started_at is not null
      order by ph.campaign_id, ph.sequence`,
    [campaignIds],
  );
}
