import type { Transaction } from "sequelize";
import { alarmEvent } from "@/lib/alarms/alarm-event";
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
  /** Told of by fits made again, long after it happened. */
  foundOnRefit?: boolean;
  mail: boolean;
};

/**
 * Opens an alarm, with its first event and the mail to everyone concerned in the same transaction. One alarm of a limit in a
 * campaign, or of a kind at a rig, is open at a time: a further breach of it opens nothing new, but brings one back that had
 * returned and that nobody had looked at, and tells of it as of a new one.
 */
export async function openAlarm(transaction: Transaction, alarm: OpenAlarm): Promise<{ alarmId: string; opened: boolean }> {
  const { now, source } = alarm;
  const opened = await row<{ id: string }>(
    `insert into alarm (campaign_id, rig_id, sensor_id, source, limit_id, kind, state, opened_at, opened_clock, phase_id, step_id, fit_run_id,
       value, limit_value, unit, text, action_text, found_on_refit)
     values ($1, $2, $3, $4, $5, $6, 'unacknowledged', $7, $8, $9, $10, $11, $12, $13, $14, $15, $16, $17)
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
      alarm.foundOnRefit ?? false,
    ],
    transaction,
  );
  const standing = opened ? undefined : await standingAlarm(transaction, alarm);
  if (standing && standing.state !== "returned") return { alarmId: standing.id, opened: false };
  if (standing) await breachAgain(transaction, standing.id, alarm);
  const alarmId = opened?.id ?? (standing as Standing).id;
  const eventId = await alarmEvent(transaction, { alarmId, now, kind: "opened", who: "Longreed", text: `${alarm.text}. ${alarm.actionText}` });
  if (alarm.mail) await queueAlarmMail(transaction, { alarmId, now, kind: opened ? "alarm" : `alarm again, event ${eventId}` });
  await notify("changed:alarms", transaction);
  return { alarmId, opened: true };
}

type Standing = { id: string; state: string };

async function standingAlarm(transaction: Transaction, { source, campaignId, limitId, rigId, kind }: OpenAlarm): Promise<Standing> {
  const found = await row<Standing>(
    source === "limit"
      ? `select id, state from alarm where campaign_id = $1 and limit_id = $2 and source = 'limit' and state <> 'cleared' for no key update`
      : `select id, state from alarm where rig_id = $1 and kind = $2 and source = 'system' and state <> 'cleared' for no key update`,
    source === "limit" ? [campaignId, limitId] : [rigId, kind],
    transaction,
  );
  if (!found) throw new Error(`alarm ${kind} was neither open nor opened`);
  return found;
}

async function breachAgain(transaction: Transaction, alarmId: string, { phaseId, stepId, fitRunId, value, text, actionText }: OpenAlarm): Promise<void> {
  await change(
    `update alarm set state = 'unacknowledged', returned_at = null, phase_id = $2, step_id = $3, fit_run_id = $4, value = $5, text = $6, action_text = $7
      where id = $1`,
    [alarmId, phaseId ?? null, stepId ?? null, fitRunId ?? null, value ?? null, text, actionText],
    transaction,
  );
}
