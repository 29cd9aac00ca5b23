import type { Transaction } from "sequelize";
import { row } from "@/lib/db";
import { queueTaskMail } from "@/lib/notifications/queue-task-mail";
import { notify } from "@/lib/notify";

type OpenTask = {
  rigId: string;
  campaignId?: string;
  stepId?: string;
  holdId?: string | null;
  kind: "ask" | "mount" | "load" | "waste" | "look" | "lot" | "other";
  instruction: string;
  urgency?: "low" | "normal" | "high";
  port?: number | null;
  dueAt?: Date;
  now: Date;
};

/** A thing for a person to do at the rig; one that cannot wait is mailed. */
export async function openTask(transaction: Transaction, task: OpenTask): Promise<string> {
  const opened = await row<{ id: string }>(
    `insert into operator_task (rig_id, campaign_id, step_id, hold_id, kind, instruction, urgency, port, state, created_at, due_at)
     values ($1, $2, $3, $4, $5, $6, $7, $8, 'open', $9, $10) returning id`,
    [
      task.rigId,
      task.campaignId ?? null,
      task.stepId ?? null,
      task.holdId ?? null,
      task.kind,
      task.instruction,
      task.urgency ?? "normal",
      task.port ?? null,
      task.now,
      task.dueAt ?? null,
    ],
    transaction,
  );
  if (!opened) throw new Error("a task was not stored");
  if (task.urgency === "high") await queueTaskMail(transaction, { taskId: opened.id, now: task.now });
  await notify("changed:tasks", transaction);
  return opened.id;
}
