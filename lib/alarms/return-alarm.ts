import type { Transaction } from "sequelize";
import { alarmEvent } from "@/lib/alarms/alarm-event";
import { rows } from "@/lib/db";
import { notify } from "@/lib/notify";

type Return = { now: Date; text: string } & ({ campaignId: string; limitId: string } | { rigId: string; kind: string });

/** Back within the limit: an acknowledged alarm is cleared by it, one that nobody has stays until somebody looked. */
export async function returnAlarm(transaction: Transaction, which: Return): Promise<void> {
  const { now, text } = which;
  const limit = "limitId" in which;
  const returned = await rows<{ id: string; state: string }>(
    `update alarm set returned_at = $3,
       state = case state when 'acknowledged' then 'cleared' else 'returned' end,
       cleared_at = case state when 'acknowledged' then $3::timestamptz end
      where state in ('unacknowledged', 'acknowledged')
        and ${limit ? "campaign_id = $1 and limit_id = $2 and source = 'limit'" : "rig_id = $1 and kind = $2 and source = 'system'"}
      returning id, state`,
    [limit ? which.campaignId : which.rigId, limit ? which.limitId : which.kind, now],
    transaction,
  );
  for (const { id, state } of returned) {
    await alarmEvent(transaction, { alarmId: id, now, kind: state === "cleared" ? "cleared" : "returned", who: "Longreed", text });
  }
  if (returned.length > 0) await notify("changed:alarms", transaction);
}
