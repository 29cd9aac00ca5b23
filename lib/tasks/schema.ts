import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { time, words } from "@/lib/schema";

export const taskKind = z.enum(["ask", "mount", "load", "waste", "look", "lot", "other"]);

export const taskQuery = pageQuery.extend({
  state: z.enum(["open", "answered", "withdrawn"]).default("open"),
  rigId: idSchema.optional(),
  campaignId: idSchema.optional(),
});

export const answerBody = z.strictObject({ answer: z.enum(["done", "cannot"]), note: words(2000).optional() });

export const taskAnswer = z.object({
  id: z.string(),
  rigId: z.string(),
  campaignId: z.string().optional(),
  kind: taskKind,
  instruction: z.string(),
  urgency: z.enum(["low", "normal", "high"]),
  state: z.enum(["open", "answered", "withdrawn"]),
  dueAt: time.optional(),
  createdAt: time,
  rig: z.string(),
  timeZone: z.string(),
  campaign: z.string().optional(),
  /** The campaign waits for it now. */
  holds: z.boolean(),
  port: z.int().optional(),
  sensorId: z.string().optional(),
  sensor: z.string().optional(),
  answer: z.enum(["done", "cannot"]).optional(),
  note: z.string().optional(),
  answeredBy: z.string().optional(),
  answeredAt: time.optional(),
});

export const taskPage = pageOf(taskAnswer);

export type TaskQuery = z.output<typeof taskQuery>;
export type TaskAnswer = z.output<typeof taskAnswer>;
