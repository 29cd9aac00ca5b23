import type { Transaction } from "sequelize";
import { returnAlarm } from "@/lib/alarms/return-alarm";
import { rows } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";

type Over = { campaignId: string; by: Actor; now: Date };

/** A person let a campaign go on that had held for a failure: its alarms return, so that the next failure is told of as a new one. */
export async function failureIsOver(transaction: Transaction, { campaignId, by, now }: Over): Promise<void> {
  const open = await rows<{ rigId: string; kind: string }>(
    `select rig_id as "rigId", kind from alarm
      where campaign_id = $1 and source = 'system' and state in ('unacknowledged', 'acknowledged')
        and (kind like 'step-%' or kind in ('measurement', 'not-clean'))`,
    [campaignId],
    transaction,
  );
  for (const alarm of open) await returnAlarm(transaction, { ...alarm, now, text: `${by.name} let the campaign go on` });
}
