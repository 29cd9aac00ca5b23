import type { Transaction } from "sequelize";
import { change } from "@/lib/db";
import { LEFT_OUT } from "@/lib/numerics/resonance/flags";

/** Keeps the last good fit of a measure step: the next sweep in that medium, set-point and mount is centred on it. */
export async function updateTrack(transaction: Transaction, { stepId }: { stepId: string }): Promise<void> {
  await change(
    `insert into track (mount_id, medium, set_point_c, f0_hz, q, step_id)
     select s.mount_id, s.medium, s.set_point_c, f.f0_hz, f.q, s.id
       from step s join fit_run r on r.campaign_id = s.campaign_id and r.current
      cross join lateral (select f0_hz, q from fit where fit_run_id = r.id and step_id = $1 and flags & ${LEFT_OUT} = 0 and f0_hz > 0 and q > 0 order by idx desc limit 1) f
      where s.id = $1 and s.mount_id is not null
     on conflict (mount_id, medium, set_point_c) do update set f0_hz = excluded.f0_hz, q = excluded.q, step_id = excluded.step_id
      where track.step_id <= excluded.step_id`,
    [stepId],
    transaction,
  );
}
