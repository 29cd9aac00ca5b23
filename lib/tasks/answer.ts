import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { audit } from "@/lib/audit/record";
import { lockCampaign, type CampaignRow } from "@/lib/campaigns/campaign-row";
import { recordEvent } from "@/lib/campaigns/record-event";
import { releaseHolds } from "@/lib/campaigns/release-hold";
import { wakeCampaign } from "@/lib/campaigns/wake-campaign";
import { change, inTransaction, row } from "@/lib/db";
import { conflict, gone, impossible, notFound } from "@/lib/errors";
import { formatDayTime } from "@/lib/format-time";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { getTask } from "@/lib/tasks/read";
import type { TaskAnswer } from "@/lib/tasks/schema";

type AnswerTask = { by: Actor; taskId: string; answer: "done" | "cannot"; note?: string; now: Date };

type LockedTask = { id: string; rigId: string; campaignId: string | null; holdId: string | null } & Pick<TaskAnswer, "kind" | "instruction" | "state"> & {
    answer: "done" | "cannot" | null;
    answeredAt: Date | null;
    answeredBy: string | null;
    rig: string;
    timeZone: string;
  };

/**
 * A person answers a task. `done` releases the hold that waited for it; `cannot` keeps the hold and opens an alarm, and a
 * person lets the campaign go on later. The same answer again changes nothing, a different one is refused with who was first.
 */
export function answerTask({ by, taskId, answer, note, now }: AnswerTask): Promise<TaskAnswer> {
  return inTransaction(async (transaction) => {
    demand(by, "answer tasks");
    const where = await row<{ rigId: string; campaignId: string | null }>(`select rig_id as "rigId", campaign_id as "campaignId" from operator_task where id = $1`, [taskId], transaction);
    if (!where) throw notFound("task");
    const campaign = where.campaignId ? await lockCampaign(transaction, { campaignId: where.campaignId, now }) : undefined;
    const task = await lockTask(transaction, taskId);
    if (task.state === "withdrawn") throw gone("The task was withdrawn: nothing needs to be done for it any more");
    if (task.state === "answered") {
      if (task.answer === answer) return getTask(taskId, transaction);
      throw conflict(`${task.answeredBy ?? "Somebody"} answered “${task.answer}” on ${formatDayTime(task.answeredAt ?? now, task.timeZone)}; that answer stands`, "answered-already");
    }
    if (answer === "done" && task.kind === "mount" && campaign) await demandMount(transaction, campaign);

    await change(
      `update operator_task set state = 'answered', answer = $2, note = $3, answered_by = $4, answered_at = $5 where id = $1`,
      [taskId, answer, note ?? null, by.id, now],
      transaction,
    );
    if (answer === "done") await goOn(transaction, task, by, now);
    else await tellOfIt(transaction, task, campaign, by, note, now);
    await audit(transaction, { by, now, action: "answer", entity: "task", entityId: taskId, detail: { answer, note: note ?? null, instruction: task.instruction } });
    await notify("changed:tasks", transaction);
    return getTask(taskId, transaction);
  });
}

async function lockTask(transaction: Transaction, taskId: string): Promise<LockedTask> {
  const task = await row<LockedTask>(
    `select t.id, t.rig_id as "rigId", t.campaign_id as "campaignId", t.hold_id as "holdId", t.kind, t.instruction, t.state, t.answer,
            t.answered_at as "answeredAt", p.name as "answeredBy", rig.name as rig, rig.time_zone as "timeZone"
       from operator_task t join rig on rig.id = t.rig_id left join person p on p.id = t.answered_by where t.id = $1 for no key update of t`,
    [taskId],
    transaction,
  );
  if (!task) throw notFound("task");
  return task;
}

async function demandMount(transaction: Transaction, { sensorId, rigId, serial, rigName }: CampaignRow): Promise<void> {
  const mount = await row(`select id from mount where sensor_id = $1 and rig_id = $2 and upper_inf(period)`, [sensorId, rigId], transaction);
  if (!mount) throw impossible(`${serial} is not mounted on ${rigName} yet. Record the mount; the task is answered by that`, undefined, "not-mounted");
}

async function goOn(transaction: Transaction, { campaignId, holdId, instruction }: LockedTask, by: Actor, now: Date): Promise<void> {
  if (!campaignId) return;
  await recordEvent(transaction, { campaignId, now, kind: "task", who: by.name, text: `Done: ${instruction}` });
  if (holdId) await releaseHolds(transaction, { campaignId, holdId, by, now });
  await wakeCampaign(transaction, campaignId);
}

async function tellOfIt(transaction: Transaction, task: LockedTask, campaign: CampaignRow | undefined, by: Actor, note: string | undefined, now: Date): Promise<void> {
  const said = note ? `: “${note}”` : "";
  if (campaign) await recordEvent(transaction, { campaignId: campaign.id, now, kind: "task", who: by.name, text: `Cannot be done: ${task.instruction}${said}` });
  await openAlarm(transaction, {
    now,
    clock: campaign?.clock,
    rigId: task.rigId,
    campaignId: campaign?.id,
    sensorId: campaign?.sensorId,
    source: "system",
    kind: `task-${task.id}`,
    text: `${task.rig}: ${by.name} cannot do “${task.instruction}”${said}`,
    actionText: task.holdId ? "The campaign waits until a person lets it go on." : "Nothing was held.",
    mail: true,
  });
}
