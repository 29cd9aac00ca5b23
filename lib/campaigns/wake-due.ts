import type { Transaction } from "sequelize";
import { rows } from "@/lib/db";
import { notify } from "@/lib/notify";

type Due = { rigId: string; clock: Date | null; now: Date };

/** A simulated clock has moved: campaigns whose wait or start has fallen due are looked at. */
export async function wakeDue(transaction: Transaction, { rigId, clock }: Due): Promise<void> {
  if (!clock) return;
  const due = await rows<{ id: string }>(
    `update campaign set needs_advance = true
      where rig_id = $1 and not needs_advance
        and ((state = 'queued' and (start_at is null or start_at <= $2)
              and not exists (select 1 from campaign other where other.rig_id = $1 and other.origin = 'protocol' and not other.set_aside
                              and (other.state in ('running', 'held') or other.parking in ('wanted', 'running'))))
          or ((state = 'running' or parking = 'running')
              and exists (select 1 from step s where s.campaign_id = campaign.id and s.kind = 'wait' and s.state = 'ready' and s.due_at <= $2)))
      returning id`,
    [rigId, clock],
    transaction,
  );
  for (const { id } of due) await notify(`campaign:${id}`, transaction);
}
