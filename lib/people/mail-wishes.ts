import type { MailWishes } from "@/lib/people/schema";
import type { Role } from "@/lib/permissions";

/** What a person is told of by mail, where nothing was said by the role. `queueAlarmMail` and `queueTaskMail` ask the same of the database. */
export const mailWishes = ({ role, notify }: { role: Role; notify: Readonly<Record<string, boolean>> }): MailWishes => ({
  alarms: notify.alarms ?? role !== "viewer",
  tasks: notify.tasks ?? (role === "operator" || role === "researcher"),
});
