/**
 * SQL for the standard uncertainty, in Hz, of `su.f0_mean - b.f0_hz`: an air reference `ph` with summary `su` of fit run
 * `su.fit_run_id` against its baseline `b`, the mean of the first n references of the mount and set-point.
 *
 *   u² = u_i² + Σ u_j² / n² − 2 u_i² / n (the last term only when the phase is one of the n)
 *
 * Phase values are taken as independent. Null where an uncertainty is missing.
 */
export const SHIFT_U = `(
  select case when count(first.f0_u) < count(*) or su.f0_u is null then null
              else sqrt(greatest(0, su.f0_u ^ 2 + sum(first.f0_u ^ 2) / count(*) ^ 2 - case when bool_or(first.id = ph.id) then 2 * su.f0_u ^ 2 / count(*) else 0 end)) end
    from (select q.id, qs.f0_u from phase q join phase_summary qs on qs.phase_id = q.id and qs.fit_run_id = su.fit_run_id
           where q.campaign_id = ph.campaign_id and q.mount_id = ph.mount_id and q.set_point_c is not distinct from ph.set_point_c and q.readout = ph.readout
             and q.medium = 'air' and q.role = 'reference' and q.closed_at is not null and qs.f0_mean is not null
           order by q.sequence limit b.n) first)`;
