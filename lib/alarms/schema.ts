import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { instant, time, words } from "@/lib/schema";

/** States of ISA-18.2; shelved lies over any of them. */
export const alarmState = z.enum(["unacknowledged", "acknowledged", "returned", "cleared"]);

export const alarmQuery = pageQuery.extend({
  state: z.enum(["open", "past", "shelved", ...alarmState.options]).optional().describe("open: not cleared; past: cleared; shelved: until later than now"),
  rigId: idSchema.optional(),
  campaignId: idSchema.optional(),
  kind: z.string().max(60).optional(),
  since: instant.optional(),
});

export const clearBody = z.strictObject({ note: words(2000) });

export const shelveBody = z.strictObject({
  until: instant.nullable().describe("null brings it back now"),
  note: words(2000).optional(),
});

const alarmEventAnswer = z.object({ at: time, kind: z.string(), who: z.string(), text: z.string() });

export const alarmAnswer = z.object({
  id: z.string(),
  campaignId: z.string().optional(),
  rigId: z.string(),
  sensorId: z.string().optional(),
  source: z.enum(["limit", "system"]),
  limitId: z.string().optional(),
  kind: z.string(),
  state: alarmState,
  shelvedUntil: time.optional(),
  openedAt: time,
  phaseId: z.string().optional(),
  value: z.number().optional(),
  limit: z.number().optional(),
  unit: z.string().optional(),
  text: z.string(),
  foundOnRefit: z.boolean(),
  /** What Longreed did about it. */
  actionText: z.string().optional(),
  /** The rig's own time of it, where its clock is simulated. */
  openedClock: time.optional(),
  rig: z.string(),
  timeZone: z.string(),
  campaign: z.string().optional(),
  sensor: z.string().optional(),
  acknowledgedBy: z.string().optional(),
  acknowledgedAt: time.optional(),
  returnedAt: time.optional(),
  clearedBy: z.string().optional(),
  clearedAt: time.optional(),
  clearNote: z.string().optional(),
  /** Oldest first, the last twenty. */
  events: z.array(alarmEventAnswer),
});

export const alarmPage = pageOf(alarmAnswer);

/** What the alarm watched: values by time against the limit. */
export const alarmSeries = z.object({
  label: z.string(),
  unit: z.string(),
  low: z.number().optional(),
  high: z.number().optional(),
  points: z.array(z.object({ at: time, value: z.number() })),
});

export const alarmDetail = alarmAnswer.extend({ series: alarmSeries.optional() });

export type AlarmState = z.output<typeof alarmState>;
export type AlarmQuery = z.output<typeof alarmQuery>;
export type AlarmAnswer = z.output<typeof alarmAnswer>;
export type AlarmDetail = z.output<typeof alarmDetail>;
export type AlarmSeries = z.output<typeof alarmSeries>;
