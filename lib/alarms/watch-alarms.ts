import type { Transaction } from "sequelize";
import { alarmEvent } from "@/lib/alarms/alarm-event";
import { change, inTransaction, rows } from "@/lib/db";
import { queueAlarmMail, REMIND_AFTER_MS } from "@/lib/notifications/queue-alarm-mail";
import { notify } from "@/lib/notify";

/** What time alone does to alarms: shelves end, and one that nobody has is mailed once more. */
export async function watchAlarms({ now }: { now: Date }): Promise<void> {
  await inTransaction((transaction) => endShelves(transaction, now));
  await inTransaction((transaction) => remind(transaction, now));
}

async function endShelves(transaction: Transaction, now: Date): Promise<void> {
  const due = await rows<{ id: string; state: string }>(
    `select id, state from alarm where state <> 'cleared' and shelved_until <= $1 for no key update skip locked`,
    [now],
    transaction,
  );
  for (const { id: alarmId, state } of due) {
    await change(`update alarm set shelved_until = null where id = $1`, [alarmId], transaction);
    const eventId = await alarmEvent(transaction, { alarmId, now, kind: "unshelved", who: "Longreed", text: "Back from the shelf" });
    if (state !== "returned") {
      await queueAlarmMail(transaction, { alarmId, now, kind: `back from the shelf, event ${eventId}`, again: "It was shelved until now, and is still beyond its limit." });
    }
  }
  if (due.length > 0) await notify("changed:alarms", transaction);
}

/** Only of those that were mailed when they opened, as a limit that does not mail stays quiet, and not soon after other mail of it. */
async function remind(transaction: Transaction, now: Date): Promise<void> {
  const due = await rows<{ id: string }>(
    `select a.id from alarm a
      where a.state = 'unacknowledged' and a.shelved_until is null and a.opened_at <= $1
        and exists (select 1 from notification n where n.alarm_id = a.id and n.kind = 'alarm')
        and not exists (select 1 from notification n where n.alarm_id = a.id and (n.kind = 'reminder' or n.created_at > $1))
      for no key update of a skip locked`,
    [new Date(now.getTime() - REMIND_AFTER_MS)],
    transaction,
  );
  for (const { id: alarmId } of due) await queueAlarmMail(transaction, { alarmId, now, kind: "reminder", again: "Nobody has it yet." });
}
