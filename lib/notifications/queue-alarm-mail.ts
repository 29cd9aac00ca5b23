import type { Transaction } from "sequelize";
import { change, row, rows } from "@/lib/db";
import { env } from "@/lib/env";
import { notify } from "@/lib/notify";
import { renderAlarmMail, type AlarmMail } from "@/lib/notifications/alarm-mail";

type Recipient = { id: string; name: string; email: string };

const ALARM = `
  select a.id, a.kind, a.text, a.action_text as "actionText", a.value, a.limit_value as "limitValue", a.unit, a.opened_at as "openedAt",
         a.opened_clock as "openedClock", rig.name as rig, rig.time_zone as "timeZone", rig.clock = 'simulated' as simulated,
         c.id as "campaignId", c.name as campaign, c.state as "campaignState", s.serial
    from alarm a join rig on rig.id = a.rig_id left join campaign c on c.id = a.campaign_id left join sensor s on s.id = a.sensor_id
   where a.id = $1`;

/** Everyone whose work an alarm concerns, unless they have said that they want no mail of alarms; a viewer only if asked for. */
const RECIPIENTS = `
  select id, name, email from person
   where closed_at is null and coalesce((notify->>'alarms')::boolean, role <> 'viewer') order by name, id`;

/** One mail per person concerned, written in the alarm's transaction and delivered by a job. */
export async function queueAlarmMail(transaction: Transaction, { alarmId, now }: { alarmId: string; now: Date }): Promise<void> {
  const alarm = await row<Omit<AlarmMail, "recipients" | "link">>(ALARM, [alarmId], transaction);
  const recipients = await rows<Recipient>(RECIPIENTS, [], transaction);
  if (!alarm || recipients.length === 0) return;
  const mail = renderAlarmMail({ ...alarm, recipients: recipients.map(({ name }) => name), link: `${env().APP_URL}/alarms/${alarmId}` });
  await change(
    `insert into notification (alarm_id, campaign_id, person_id, kind, address, subject, body_text, body_html, state, created_at)
     select $1, $2, p.id, 'alarm', p.email, $3, $4, $5, 'waiting', $6 from person p where p.id = any($7)
     on conflict do nothing`,
    [alarmId, alarm.campaignId, mail.subject, mail.text, mail.html, now, recipients.map(({ id }) => id)],
    transaction,
  );
  await notify("mail", transaction);
}
