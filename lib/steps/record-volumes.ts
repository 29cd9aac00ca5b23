import type { Transaction } from "sequelize";
import { change } from "@/lib/db";

/**
 * Books what a finished fill, rinse or drain moved: out of the port's bottle, into the waste. A rinse goes through the cell
 * to waste; a drain takes what the cell held before it. A rig that measures volumes overrules the book at its next heartbeat.
 */
export async function recordVolumes(transaction: Transaction, stepId: string): Promise<void> {
  await change(
    `update port set remaining_ml = greatest(0, port.remaining_ml - used.ml)
       from (select s.rig_id, slot.port, (s.params->>'volumeMl')::float8 * coalesce((s.params->>'times')::int, 1) as ml
               from step s join campaign_slot slot on slot.campaign_id = s.campaign_id and slot.slot = s.slot
              where s.id = $1 and s.kind in ('fill', 'rinse')) used
      where port.rig_id = used.rig_id and port.number = used.port`,
    [stepId],
    transaction,
  );
  await change(
    `update rig set waste_ml = waste_ml + drained.ml
       from (select s.rig_id,
                    case s.kind when 'rinse' then (s.params->>'volumeMl')::float8 * coalesce((s.params->>'times')::int, 1)
                    else coalesce((s.cursor->'cell'->>'volumeMl')::float8, 0)
                    end as ml
               from step s where s.id = $1 and s.kind in ('rinse', 'drain')) drained
      where rig.id = drained.rig_id`,
    [stepId],
    transaction,
  );
}
