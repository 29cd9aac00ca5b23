"use client";

import Link from "next/link";
import { Slips } from "@/components/ui/slip";
import { plural } from "@/lib/format";
import { may, type Role } from "@/lib/permissions";
import type { TodayAnswer } from "@/lib/today/schema";
import { AlarmSlip } from "../slips/alarm-slip";
import { TaskSlip } from "../slips/task-slip";
import { useLaterTasks } from "./use-later-tasks";

const MOST = 3;

/** Alarms that nobody has, then tasks by due time; at most three, the rest one press away, with those put off for later. Nothing at all when nothing needs a person. */
export function TodaySlips({ today: { alarms, tasks, moreTasks, now }, role }: { today: TodayAnswer; role: Role }) {
  const { isLater, putOff } = useLaterTasks();
  const nobodyHas = alarms.filter(({ state, shelvedUntil }) => state === "unacknowledged" && !shelvedUntil);
  const shownAlarms = nobodyHas.slice(0, MOST);
  const shownTasks = tasks.filter(({ id }) => !isLater(id, now)).slice(0, MOST - shownAlarms.length);
  if (nobodyHas.length + tasks.length === 0) return null;
  const all = [
    nobodyHas.length > shownAlarms.length && { href: "/alarms", text: `All ${nobodyHas.length} alarms` },
    tasks.length > shownTasks.length && { href: "/tasks", text: `All ${tasks.length}${moreTasks ? " and more" : ""} ${plural(tasks.length, "task")}` },
  ].filter((link) => link !== false);
  return (
    <div className="page-row">
      <div className="margin" />
      <div className="body min-w-0">
        {shownAlarms.length + shownTasks.length > 0 && (
          <Slips withAlarm={shownAlarms.length > 0}>
            {shownAlarms.map((alarm) => <AlarmSlip key={alarm.id} alarm={alarm} now={now} may={may(role, "handle alarms")} />)}
            {shownTasks.map((task) => <TaskSlip key={task.id} task={task} now={now} may={may(role, "answer tasks")} onLater={() => putOff(task.id, now)} />)}
          </Slips>
        )}
        {all.length > 0 && (
          <p className="caption flex gap-4">{all.map(({ href, text }) => <Link key={href} href={href}>{text}</Link>)}</p>
        )}
      </div>
    </div>
  );
}
