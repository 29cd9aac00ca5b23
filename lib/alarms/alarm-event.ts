import type { Transaction } from "sequelize";
import { row } from "@/lib/db";

type Event = { alarmId: string; now: Date; kind: string; who: string; text: string };

/** A line in the alarm's record; returns its id. */
export async function alarmEvent(transaction: Transaction, { alarmId, now, kind, who, text }: Event): Promise<string> {
  const made = await row<{ id: string }>(
    `insert into alarm_event (alarm_id, at, kind, who, text) values ($1, $2, $3, $4, $5) returning id`,
    [alarmId, now, kind, who, text],
    transaction,
  );
  if (!made) throw new Error("an alarm event was not stored");
  return made.id;
}
