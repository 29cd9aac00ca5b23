import type { Transaction } from "sequelize";
import { change, row, rows } from "@/lib/db";
import { env } from "@/lib/env";
import { readLaboratory } from "@/lib/laboratory";
import { renderTaskMail, type TaskMail } from "@/lib/notifications/task-mail";
import { notify } from "@/lib/notify";

const TASK = `
  select t.instruction, t.created_at as "createdAt", t.due_at as "dueAt", rig.name as rig, rig.time_zone as "timeZone", c.id as "campaignId",
         c.name as campaign, t.hold_id is not null as holds
    from operator_task t join rig on rig.id = t.rig_id left join campaign c on c.id = t.campaign_id where t.id = $1`;

/** Those who do tasks, unless they have said that they want no mail of them; others only if asked for. */
const RECIPIENTS = `
  select id, name from person
   where closed_at is null and coalesce((notify->>'tasks')::boolean, role in ('operator', 'researcher')) order by name, id`;

/** Mail of a task that cannot wait, written in its transaction. */
export async function queueTaskMail(transaction: Transaction, { taskId, now }: { taskId: string; now: Date }): Promise<void> {
  const task = await row<Omit<TaskMail, "recipients" | "appUrl" | "laboratory">>(TASK, [taskId], transaction);
  const recipients = await rows<{ id: string; name: string }>(RECIPIENTS, [], transaction);
  if (!task || recipients.length === 0) return;
  const { name: laboratory } = await readLaboratory(transaction);
  const mail = renderTaskMail({ ...task, laboratory, recipients: recipients.map(({ name }) => name), appUrl: env().APP_URL });
  await change(
    `insert into notification (operator_task_id, campaign_id, person_id, kind, address, subject, body_text, body_html, state, created_at)
     select $1, $2, p.id, 'task', p.email, $3, $4, $5, 'waiting', $6 from person p where p.id = any($7)
     on conflict do nothing`,
    [taskId, task.campaignId, mail.subject, mail.text, mail.html, now, recipients.map(({ id }) => id)],
    transaction,
  );
  await notify("mail", transaction);
}
