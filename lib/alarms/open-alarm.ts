import type { Transaction } from "sequelize";
import { change, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import { queueAlarmMail } from "@/lib/notifications/queue-alarm-mail";

type OpenAlarm = {
  now: Date;
  /** Rig time of what happened; the server's where it is left out. */
  clock?: Date | null;
  rigId: string;
  campaignId?: string;
  sensorId?: string;
  source: "limit" | "system";
  limitId?: string;
  kind: string;
  phaseId?: string;
  stepId?: string;
  fitRunId?: string;
  value?: number;
  limitValue?: number;
  unit?: string;
  /** What, where and how far off. */
  text: string;
  /** What Longreed did about it. */
  actionText: string;
  mail: boolean;
};

/**
 * Opens an alarm, with its first event and the mail to everyone concerned in the same transaction. One alarm of a limit in a
 * campaign, or of a kind at a rig, is open at a time: a further breach of it opens nothing new.
 */
export async function openAlarm(transaction: Transaction, alarm: OpenAlarm): Promise<{ alarmId: string; opened: boolean }> {
  const { now, source } = alarm;
  const opened = await row<{ id: string }>(
    `insert into alarm (campaign_id, rig_id, sensor_id, source, limit_id, kind, state, opened_at, opened_clock, phase_id, step_id, fit_run_id,
       value, limit_value, unit, text, action_text)
     values ($1, $2, $3, $4, $5, $6, 'unacknowledged', $7, $8, $9, $10, $11, $12, $13, $14, $15, $16)
     on conflict do nothing returning id`,
    [
      alarm.campaignId ?? null,
      alarm.rigId,
      alarm.sensorId ?? null,
      source,
      alarm.limitId ?? null,
      alarm.kind,
      now,
      alarm.clock ?? now,
      alarm.phaseId ?? null,
      alarm.stepId ?? null,
      alarm.fitRunId ?? null,
      alarm.value ?? null,
      alarm.limitValue ?? null,
      alarm.unit ?? null,
      alarm.text,
      alarm.actionText,
    ],
    transaction,
  );
  if (!opened) return { alarmId: await standing(transaction, alarm), opened: false };
  await alarmEvent(transaction, { alarmId: opened.id, now, kind: "opened", who: "Longreed", text: `${alarm.text}. ${alarm.actionText}` });
  if (alarm.mail) await queueAlarmMail(transaction, { alarmId: opened.id, now });
  await notify("changed:alarms", transaction);
  return { alarmId: opened.id, opened: true };
}

async function standing(transaction: Transaction, { source, campaignId, limitId, rigId, kind }: OpenAlarm): Promise<string> {
  const found = await row<{ id: string }>(
    source === "limit"
      ? `select id from alarm where campaign_id = $1 and limit_id = $2 and source = 'limit' and state <> 'cleared'`
      : `select id from alarm where rig_id = $1 and kind = $2 and source = 'system' and state <> 'cleared'`,
    source === "limit" ? [campaignId, limitId] : [rigId, kind],
    transaction,
  );
  if (!found) throw new Error(`alarm ${kind} was neither open nor opened`);
  return found.id;
}

type Event = { alarmId: string; now: Date; kind: string; who: string; text: string };

export async function alarmEvent(transaction: Transaction, { alarmId, now, kind, who, text }: Event): Promise<void> {
  await change(`insert into alarm_event (alarm_id, at, kind, who, text) values ($1, $2, $3, $4, $5)`, [alarmId, now, kind, who, text], transaction);
}
