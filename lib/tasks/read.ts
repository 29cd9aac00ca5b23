import type { Transaction } from "sequelize";
import { z } from "zod";
import { row, rows } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import { time } from "@/lib/schema";
import type { TaskAnswer, TaskQuery } from "@/lib/tasks/schema";

type Times = "dueAt" | "createdAt" | "answeredAt";
type TaskRow = { [K in Exclude<keyof TaskAnswer, Times>]-?: undefined extends TaskAnswer[K] ? Exclude<TaskAnswer[K], undefined> | null : TaskAnswer[K] } & {
  dueAt: Date | null;
  createdAt: Date;
  answeredAt: Date | null;
};

const SELECT = `
  select t.id, t.rig_id as "rigId", t.campaign_id as "campaignId", t.kind, t.instruction, t.urgency, t.state, t.due_at as "dueAt",
         t.created_at as "createdAt", rig.name as rig, rig.time_zone as "timeZone", c.name as campaign,
         (t.state = 'open' and h.id is not null) as holds, t.port, case when t.kind = 'mount' then c.sensor_id end as "sensorId",
         case when t.kind = 'mount' then s.serial end as sensor, t.answer, t.note, p.name as "answeredBy", t.answered_at as "answeredAt"
    from operator_task t
    join rig on rig.id = t.rig_id
    left join campaign c on c.id = t.campaign_id
    left join sensor s on s.id = c.sensor_id
    left join hold h on h.id = t.hold_id and h.released_at is null
    left join person p on p.id = t.answered_by`;

/** Open tasks by when they are due, one without a time as of when it was made; those answered or withdrawn the newest first. */
export async function findTasks({ state, rigId, campaignId, limit, cursor }: TaskQuery): Promise<Page<TaskAnswer>> {
  const [at, id] = readCursor(cursor, z.tuple([time, idSchema])) ?? [null, null];
  const open = state === "open";
  const key = open ? "coalesce(t.due_at, t.created_at)" : "coalesce(t.answered_at, t.created_at)";
  const found = await rows<TaskRow>(
    `${SELECT}
      where t.state = $1 and ($2::bigint is null or t.rig_id = $2) and ($3::bigint is null or t.campaign_id = $3)
        and ($4::timestamptz is null or (${key}, t.id) ${open ? ">" : "<"} ($4, $5::bigint))
      order by ${key} ${open ? "" : "desc"}, t.id ${open ? "" : "desc"} limit $6`,
    [state, rigId ?? null, campaignId ?? null, at, id, limit + 1],
  );
  const { items, nextCursor } = cutPage(found, limit, (task) => [((open ? task.dueAt : task.answeredAt) ?? task.createdAt).toISOString(), task.id]);
  return { items: items.map(present), nextCursor };
}

/** @throws AppError 404 when there is none. */
export async function getTask(taskId: string, transaction?: Transaction): Promise<TaskAnswer> {
  const found = await row<TaskRow>(`${SELECT} where t.id = $1`, [taskId], transaction);
  if (!found) throw notFound("task");
  return present(found);
}

function present({ dueAt, createdAt, answeredAt, ...task }: TaskRow): TaskAnswer {
  const known = Object.fromEntries(Object.entries(task).filter(([, value]) => value !== null)) as Omit<TaskAnswer, Times>;
  return {
    ...known,
    createdAt: createdAt.toISOString(),
    ...(dueAt ? { dueAt: dueAt.toISOString() } : {}),
    ...(answeredAt ? { answeredAt: answeredAt.toISOString() } : {}),
  };
}
