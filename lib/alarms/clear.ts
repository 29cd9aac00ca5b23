import { clearedInWords, lockedAlarm } from "@/lib/alarms/locked-alarm";
import { alarmEvent } from "@/lib/alarms/alarm-event";
import { readAlarm } from "@/lib/alarms/read";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { audit } from "@/lib/audit/record";
import { change, inTransaction } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";

type Clear = { by: Actor; alarmId: string; note: string; now: Date };

/** A person ends an alarm with a note, whether or not its value is back. No hold is released by it; a further breach opens a new alarm. */
export function clearAlarm({ by, alarmId, note, now }: Clear): Promise<AlarmAnswer> {
  return inTransaction(async (transaction) => {
    const alarm = await lockedAlarm(transaction, { by, alarmId });
    if (alarm.state === "cleared") {
      if (alarm.clearedBy !== by.id) throw conflict(clearedInWords(alarm));
      return readAlarm({ alarmId, now }, transaction);
    }
    await change(
      `update alarm set state = 'cleared', cleared_by = $2, cleared_at = $3, clear_note = $4, shelved_until = null,
         acknowledged_by = coalesce(acknowledged_by, $2), acknowledged_at = coalesce(acknowledged_at, $3) where id = $1`,
      [alarmId, by.id, now, note],
      transaction,
    );
    await alarmEvent(transaction, { alarmId, now, kind: "cleared", who: by.name, text: `Cleared: ${note}` });
    await audit(transaction, { by, now, action: "clear", entity: "alarm", entityId: alarmId, detail: { note, from: alarm.state } });
    await notify("changed:alarms", transaction);
    return readAlarm({ alarmId, now }, transaction);
  });
}
