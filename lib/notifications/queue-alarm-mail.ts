import type { Transaction } from "sequelize";
import { alarmEvent } from "@/lib/alarms/alarm-event";
import { change, row, rows } from "@/lib/db";
import { env } from "@/lib/env";
import { plural } from "@/lib/format";
import { readLaboratory } from "@/lib/laboratory";
import { renderAlarmMail, type AlarmMail } from "@/lib/notifications/alarm-mail";
import { readStripCells } from "@/lib/notifications/strip-cells";
import { notify } from "@/lib/notify";

/** An alarm that nobody has after this is mailed once more. */
export const REMIND_AFTER_MS = 4 * 3_600_000;

type Found = Pick<
  AlarmMail,
  "id" | "kind" | "text" | "actionText" | "openedAt" | "openedClock" | "rig" | "timeZone" | "simulated" | "campaignId" | "campaign" | "campaignState" | "serial"
> & { cycle: number | null; cycles: number | null; repeats: number; f0Hz: number | null; f0U: number | null; q: number | null; qU: number | null };

const ALARM = `
  select a.id, a.kind, a.text, a.action_text as "actionText", a.opened_at as "openedAt", a.opened_clock as "openedClock", rig.name as rig,
         rig.time_zone as "timeZone", rig.clock = 'simulated' as simulated, c.id as "campaignId", c.name as campaign, c.state as "campaignState",
         s.serial, (c.cursor->>'cycle')::int as cycle, (c.planned->>'cycles')::int as cycles, coalesce(done.repeats, 0)::int as repeats,
         air.f0_mean as "f0Hz", air.f0_u as "f0U", air.q_mean as q, air.q_u as "qU"
    from alarm a
    join rig on rig.id = a.rig_id
    left join campaign c on c.id = a.campaign_id
    left join sensor s on s.id = a.sensor_id
    left join lateral (select sum(stored) as repeats from step where campaign_id = c.id and kind = 'measure' and role <> 'find') done on true
    left join lateral (
      select su.f0_mean, su.f0_u, su.q_mean, su.q_u
        from phase p join phase_summary su on su.phase_id = p.id join fit_run r on r.id = su.fit_run_id and r.current
       where p.campaign_id = c.id and p.medium = 'air' and p.role = 'reference' and su.f0_mean is not null order by p.sequence desc limit 1) air on true
   where a.id = $1`;

/** Everyone whose work an alarm concerns, unless they have said that they want no mail of alarms; a viewer only if asked for. */
const RECIPIENTS = `
  select id, name from person
   where closed_at is null and coalesce((notify->>'alarms')::boolean, role <> 'viewer') order by name, id`;

type Queue = { alarmId: string; now: Date; kind?: string; again?: string };

/** One mail per person concerned, written in the alarm's transaction and delivered by a job. Of each `kind` there is one. */
export async function queueAlarmMail(transaction: Transaction, { alarmId, now, kind = "alarm", again }: Queue): Promise<void> {
  const found = await row<Found>(ALARM, [alarmId], transaction);
  const recipients = await rows<{ id: string; name: string }>(RECIPIENTS, [], transaction);
  if (!found || recipients.length === 0) return;
  const mail = renderAlarmMail(await gather(transaction, found, { recipients: recipients.map(({ name }) => name), now, again }));
  const written = await change(
    `insert into notification (alarm_id, campaign_id, person_id, kind, address, subject, body_text, body_html, state, created_at)
     select $1, $2, p.id, $8, p.email, $3, $4, $5, 'waiting', $6 from person p where p.id = any($7)
     on conflict do nothing`,
    [alarmId, found.campaignId, mail.subject, mail.text, mail.html, now, recipients.map(({ id }) => id), kind],
    transaction,
  );
  if (written === 0) return;
  await alarmEvent(transaction, { alarmId, now, kind: "mailed", who: "Longreed", text: `E-mailed ${written} ${plural(written, "person", "people")}${again ? " again" : ""}` });
  await notify("mail", transaction);
}

async function gather(transaction: Transaction, found: Found, { recipients, now, again }: { recipients: string[]; now: Date; again?: string }): Promise<AlarmMail> {
  const { cycle, cycles, repeats, f0Hz, f0U, q, qU, ...alarm } = found;
  const halted = alarm.campaignState === "held" || alarm.campaignState === "stopped";
  const cells = alarm.campaignId ? await readStripCells(transaction, alarm.campaignId) : [];
  return {
    ...alarm,
    laboratory: (await readLaboratory(transaction)).name,
    progress: alarm.campaignId ? { cycle: cycle ?? 0, cycles, repeats } : null,
    lastAir: f0Hz !== null && q !== null ? { f0Hz, f0U, q, qU } : null,
    strip: halted && cells.length > 0 ? [...cells, { letter: "", kind: "halt", tint: 1 }] : cells,
    recipients,
    againAt: again ? null : new Date(now.getTime() + REMIND_AFTER_MS),
    again,
    appUrl: env().APP_URL,
  };
}
