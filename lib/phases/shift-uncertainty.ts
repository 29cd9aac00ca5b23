/** SQL for one row about the references that a baseline `b` is the mean of: `ids`, `n`, and the sum `u2` of their u² in Hz², null where one is missing. */
export const BASELINE_REFERENCES = `(
  select array_agg(first.id) as ids, count(*) as n, case when count(first.f0_u) = count(*) then sum(first.f0_u ^ 2) end as u2
    from (select q.id, qs.f0_u from phase q join phase_summary qs on qs.phase_id = q.id and qs.fit_run_id = b.fit_run_id
           where q.campaign_id = b.campaign_id and q.mount_id is not distinct from b.mount_id and q.set_point_c is not distinct from b.set_point_c and q.readout = b.readout
             and q.medium = 'air' and q.role = 'reference' and q.closed_at is not null and qs.f0_mean is not null
           order by q.sequence limit b.n) first)`;

/**
 * SQL for the standard uncertainty, in Hz, of `su.f0_mean - b.f0_hz`: an air reference `ph` with summary `su` against its baseline
 * `b`, the mean of the first n references of the mount and set-point, which `base` tells of (`BASELINE_REFERENCES`).
 *
 *   u² = u_i² + Σ u_j² / n² − 2 u_i² / n (the last term only when the phase is one of the n)
 *
 * Phase values are taken as independent. Null where an uncertainty is missing.
 */
export const SHIFT_U_OF_BASE = `case when su.f0_u is not null and base.u2 is not null
  then sqrt(greatest(0, su.f0_u ^ 2 + base.u2 / base.n ^ 2 - case when ph.id = any(base.ids) then 2 * su.f0_u ^ 2 / base.n else 0 end)) end`;

/** The same for a single reference, which looks up its baseline's references by itself. */
export const SHIFT_U = `(select ${SHIFT_U_OF_BASE} from ${BASELINE_REFERENCES} base)`;
