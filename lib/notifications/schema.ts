import { z } from "zod";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { time } from "@/lib/schema";

export const notificationQuery = pageQuery.extend({ state: z.enum(["waiting", "sent", "failed"]).default("failed") });

export const notificationAnswer = z.object({
  id: z.string(),
  kind: z.string(),
  state: z.enum(["waiting", "sent", "failed"]),
  person: z.string(),
  address: z.string(),
  subject: z.string(),
  tries: z.int(),
  /** What the mail server said last. */
  error: z.string().nullable(),
  alarmId: z.string().nullable(),
  createdAt: time,
  sentAt: time.nullable(),
});

export const notificationPage = pageOf(notificationAnswer);

export type NotificationQuery = z.output<typeof notificationQuery>;
export type NotificationAnswer = z.output<typeof notificationAnswer>;
