import { z } from "zod";
import { alarmAnswer } from "@/lib/alarms/schema";
import { campaignItem } from "@/lib/campaigns/answers";
import { taskAnswer } from "@/lib/tasks/schema";

const time = z.string();

export const todayRig = z.object({
  id: z.string(),
  name: z.string(),
  timeZone: z.string(),
  clock: z.enum(["real", "simulated"]),
  /** By the rig's own clock; null before a simulated rig's first report. */
  now: time.nullable(),
  lastContactAt: time.nullable(),
  /** Something runs there, and its agent was not heard for longer than is told of. */
  silent: z.boolean(),
  campaign: campaignItem.nullable(),
  /** What its step is doing: "2-Propanol, repeat 188 of 300". */
  doing: z.string().nullable(),
  /** By the rig's own clock: since when a limit, a failure or silence holds it. */
  haltedAt: time.nullable(),
  parked: z.boolean(),
  /** Who has the alarm of what halted it. */
  takenOnBy: z.string().nullable(),
  next: z.object({ id: z.string(), name: z.string() }).nullable(),
});

export const todayAnswer = z.object({
  now: time,
  laboratory: z.object({ name: z.string(), timeZone: z.string() }),
  rigs: z.array(todayRig),
  /** Open alarms, those that nobody has first. */
  alarms: z.array(alarmAnswer),
  /** Open tasks by when they are due, at most fifty. */
  tasks: z.array(taskAnswer),
  moreTasks: z.boolean(),
  /** Since the evening before, the newest first. */
  log: z.object({ since: time, items: z.array(z.object({ at: time, rig: z.string(), text: z.string(), campaignId: z.string().nullable() })) }),
});

export type TodayRig = z.output<typeof todayRig>;
export type TodayAnswer = z.output<typeof todayAnswer>;
