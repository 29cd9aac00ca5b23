import type { Metadata } from "next";
import { Hydrated } from "@/components/hydrated";
import { openAlarmsOptions } from "@/lib/alarms/client";
import { findAlarms } from "@/lib/alarms/read";
import { readLaboratory } from "@/lib/laboratory";
import { currentPerson } from "@/lib/people/current-person";
import { answeredTasksOptions, tasksOptions } from "@/lib/tasks/client";
import { findTasks } from "@/lib/tasks/read";
import { TasksScreen } from "./tasks-screen";

export const metadata: Metadata = { title: "Tasks" };

export default async function TasksPage() {
  const { role, name } = await currentPerson();
  const now = new Date();
  const [laboratory, alarms, tasks, answered] = await Promise.all([
    readLaboratory(),
    findAlarms({ query: { state: "open", limit: 200 }, now }),
    findTasks({ state: "open", limit: 200 }),
    findTasks({ state: "answered", limit: 50 }),
  ]);
  return (
    <Hydrated
      data={[
        [openAlarmsOptions().queryKey, alarms],
        [tasksOptions().queryKey, tasks],
        [answeredTasksOptions().queryKey, answered],
      ]}
    >
      <TasksScreen role={role} name={name} zone={laboratory.timeZone} asOf={now.toISOString()} />
    </Hydrated>
  );
}
