import type { Transaction } from "sequelize";
import type { AlarmState } from "@/lib/alarms/schema";
import { row } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { formatDayTime } from "@/lib/format-time";
import { demand, type Actor } from "@/lib/people/actor";

export type LockedAlarm = {
  id: string;
  state: AlarmState;
  acknowledgedBy: string | null;
  clearedBy: string | null;
  clearer: string | null;
  clearedAt: Date | null;
  shelvedUntil: Date | null;
  timeZone: string;
};

/** An alarm, its row locked, for a person who may handle it. @throws AppError 403, 404. */
export async function lockedAlarm(transaction: Transaction, { by, alarmId }: { by: Actor; alarmId: string }): Promise<LockedAlarm> {
  demand(by, "handle alarms");
  const alarm = await row<LockedAlarm>(
    `select a.id, a.state, a.acknowledged_by as "acknowledgedBy", a.cleared_by as "clearedBy", p.name as clearer, a.cleared_at as "clearedAt",
            a.shelved_until as "shelvedUntil", rig.time_zone as "timeZone"
       from alarm a join rig on rig.id = a.rig_id left join person p on p.id = a.cleared_by where a.id = $1 for no key update of a`,
    [alarmId],
    transaction,
  );
  if (!alarm) throw notFound("alarm");
  return alarm;
}

export const clearedInWords = ({ clearer, clearedAt, timeZone }: LockedAlarm): string =>
  `The alarm was cleared ${clearer ? `by ${clearer}` : "by itself, as it was back within its limit,"} on ${formatDayTime(clearedAt ?? 0, timeZone)}`;
