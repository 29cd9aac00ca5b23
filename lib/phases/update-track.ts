import type { Transaction } from "sequelize";
import { change } from "@/lib/db";
import { LEFT_OUT } from "@/lib/numerics/resonance/flags";

/** Keeps the last good fit of a measure step: the next sweep in that medium, set-point and mount is centred on it. */
export async function updateTrack(transaction: Transaction, { stepId }: { stepId: string }): Promise<void> {
  await change(
    `insert into track (mount_id, medium, set_point_c, f0_hz, q, step_id)
     select s.mount_id, s.medium, s.set_point_c, f.f0_hz, f.q, s.id
       from step s join fit_run r on r.campaign_id = s.campaign_id and r.current join fit f on f.fit_run_id = r.id and f.step_id = s.id
      where s.id = $1 and s.mount_id is not null and f.flags & ${LEFT_OUT} = 0 and f.f0_hz > 0 and f.q > 0
      order by f.idx desc limit 1
     on conflict (mount_id, medium, set_point_c) do update set f0_hz = excluded.f0_hz, q = excluded.q, step_id = excluded.step_id
      where track.step_id <= excluded.step_id`,
    [stepId],
    transaction,
  );
}
