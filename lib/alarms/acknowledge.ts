import { clearedInWords, lockedAlarm } from "@/lib/alarms/locked-alarm";
import { alarmEvent } from "@/lib/alarms/alarm-event";
import { readAlarm } from "@/lib/alarms/read";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { audit } from "@/lib/audit/record";
import { change, inTransaction } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";

type Acknowledge = { by: Actor; alarmId: string; now: Date };

/**
 * "I have this". An alarm that is back within its limit already is cleared by it. One that somebody has stays with that
 * person, whose name is in the answer; pressing again changes nothing.
 */
export function acknowledgeAlarm({ by, alarmId, now }: Acknowledge): Promise<AlarmAnswer> {
  return inTransaction(async (transaction) => {
    const alarm = await lockedAlarm(transaction, { by, alarmId });
    if (alarm.state === "cleared" && alarm.acknowledgedBy !== by.id) throw conflict(clearedInWords(alarm));
    if (alarm.state === "acknowledged" || alarm.state === "cleared") return readAlarm({ alarmId, now }, transaction);

    const back = alarm.state === "returned";
    await change(
      `update alarm set acknowledged_by = $2, acknowledged_at = $3, state = case when $4::boolean then 'cleared' else 'acknowledged' end,
         cleared_by = case when $4::boolean then $2::bigint end, cleared_at = case when $4::boolean then $3::timestamptz end where id = $1`,
      [alarmId, by.id, now, back],
      transaction,
    );
    await alarmEvent(transaction, { alarmId, now, kind: "acknowledged", who: by.name, text: `${by.name} has it` });
    if (back) await alarmEvent(transaction, { alarmId, now, kind: "cleared", who: by.name, text: "Cleared: it was back within its limit" });
    await audit(transaction, { by, now, action: "acknowledge", entity: "alarm", entityId: alarmId });
    await notify("changed:alarms", transaction);
    return readAlarm({ alarmId, now }, transaction);
  });
}
