import { rows } from "@/lib/db";
import { BASELINE_REFERENCES, SHIFT_U_OF_BASE } from "@/lib/phases/shift-uncertainty";

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
    `with base as materialized (
       select b.campaign_id, b.mount_id, b.set_point_c, b.readout, b.f0_hz, b.q, b.complete_at, base.ids, base.n, base.u2 from baseline b join fit_run r on r.id = b.fit_run_id and r.current cross join lateral ${BASELINE_REFERENCES} base
        where b.campaign_id = any($1::bigint[]))
     select ph.campaign_id as "campaignId", ph.cycle, ph.id as "phaseId", ph.sequence, ph.started_at as at, su.f0_mean as "f0Hz", su.f0_u as u, su.q_mean as q, su.q_u as "qU",
            base.f0_hz as "baselineHz", base.q as "baselineQ", base.complete_at is not null as "baselineComplete", ${SHIFT_U_OF_BASE} as "shiftU"
       from phase ph join fit_run r on r.campaign_id = ph.campaign_id and r.current join phase_summary su on su.phase_id = ph.id and su.fit_run_id = r.id
       left join base on base.campaign_id = ph.campaign_id and base.mount_id is not distinct from ph.mount_id and base.set_point_c is not distinct from ph.set_point_c and base.readout = ph.readout
      where ph.campaign_id = any($1::bigint[]) and ph.medium = 'air' and ph.role = 'reference' and su.f0_mean is not null and ph.started_at is not null
      order by ph.campaign_id, ph.sequence`,
    [campaignIds],
  );
}
