import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { recordEvent } from "@/lib/campaigns/record-event";
import { releaseHolds } from "@/lib/campaigns/release-hold";
import { wakeCampaign } from "@/lib/campaigns/wake-campaign";
import { rows } from "@/lib/db";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";
import type { OperatorTask } from "@/models/operator-task";

type Fulfilment = {
  rigId: string;
  kind: OperatorTask["kind"];
  port?: number;
  sensorId?: string;
  /** What was done, as the task's note. */
  note: string;
  by: Actor;
  now: Date;
};

/**
 * Whoever does what a task asks for has answered it: the open tasks of that kind on the rig (for that port, for that
 * sensor) are answered `done` and the holds that waited for them end.
 * @returns How many there were.
 */
export async function fulfilTasks(transaction: Transaction, { rigId, kind, port, sensorId, note, by, now }: Fulfilment): Promise<number> {
  const fulfilled = await rows<{ id: string; holdId: string | null; campaignId: string | null; instruction: string }>(
    `update operator_task t set state = 'answered', answer = 'done', note = $5, answered_by = $6, answered_at = $7
      where t.rig_id = $1 and t.kind = $2 and t.state = 'open' and ($3::int is null or t.port = $3)
        and ($4::bigint is null or exists (select 1 from campaign c where c.id = t.campaign_id and c.sensor_id = $4))
      returning t.id, t.hold_id as "holdId", t.campaign_id as "campaignId", t.instruction`,
    [rigId, kind, port ?? null, sensorId ?? null, note, by.id, now],
    transaction,
  );
  for (const { id, holdId, campaignId, instruction } of fulfilled) {
    await audit(transaction, { by, now, action: "answer", entity: "task", entityId: id, detail: { answer: "done", note, instruction } });
    if (!campaignId) continue;
    await recordEvent(transaction, { campaignId, now, kind: "task", who: by.name, text: `Done: ${instruction}. ${note}` });
    if (holdId) await releaseHolds(transaction, { campaignId, holdId, by, now });
    await wakeCampaign(transaction, campaignId);
  }
  if (fulfilled.length > 0) await notify("changed:tasks", transaction);
  return fulfilled.length;
}
