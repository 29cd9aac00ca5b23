import { clearedInWords, lockedAlarm } from "@/lib/alarms/locked-alarm";
import { alarmEvent } from "@/lib/alarms/alarm-event";
import { readAlarm } from "@/lib/alarms/read";
import type { AlarmAnswer } from "@/lib/alarms/schema";
import { audit } from "@/lib/audit/record";
import { change, inTransaction } from "@/lib/db";
import { conflict, impossible } from "@/lib/errors";
import { formatDayTime } from "@/lib/format-time";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";

/** Longer than this an alarm is not out of sight; whoever wants that clears it with a note. */
const LONGEST_MS = 7 * 86_400_000;

type Shelve = { by: Actor; alarmId: string; until: Date | null; note?: string; now: Date };

/** Lays an alarm aside until a time, over whatever state it is in: it is not counted and sends no mail. Null brings it back now. */
export async function shelveAlarm({ by, alarmId, until, note, now }: Shelve): Promise<AlarmAnswer> {
  if (until && until <= now) throw impossible("An alarm can be shelved until a time to come only");
  if (until && until.getTime() - now.getTime() > LONGEST_MS) throw impossible("An alarm can be shelved for seven days at most; clear it with a note instead");
  return inTransaction(async (transaction) => {
    const alarm = await lockedAlarm(transaction, { by, alarmId });
    if (alarm.state === "cleared") throw conflict(clearedInWords(alarm));
    if (alarm.shelvedUntil?.getTime() === until?.getTime()) return readAlarm({ alarmId, now }, transaction);

    await change(`update alarm set shelved_until = $2 where id = $1`, [alarmId, until], transaction);
    const text = until ? `Shelved until ${formatDayTime(until, alarm.timeZone, now)}${note ? `: ${note}` : ""}` : "Brought back from the shelf";
    await alarmEvent(transaction, { alarmId, now, kind: until ? "shelved" : "unshelved", who: by.name, text });
    await audit(transaction, { by, now, action: until ? "shelve" : "unshelve", entity: "alarm", entityId: alarmId, detail: { until: until?.toISOString() ?? null, note: note ?? null } });
    await notify("changed:alarms", transaction);
    return readAlarm({ alarmId, now }, transaction);
  });
}
