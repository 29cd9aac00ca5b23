import { z } from "zod";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { idSchema } from "@/lib/http/ids";
import { campaignState, holdReason } from "@/lib/campaigns/schema";

const time = z.string();
export const tint = z.union([z.literal(1), z.literal(2), z.literal(3)]);

export const holdAnswer = z.object({
  id: z.string(),
  reason: holdReason,
  by: z.string().optional(),
  openedAt: time,
  releasedAt: time.optional(),
  /** The same by the rig's clock. */
  since: time,
  until: time.optional(),
  text: z.string(),
});

const expectedEnd = z.object({ at: time, earliest: time, latest: time });

export const campaignItem = z.object({
  id: z.string(),
  name: z.string(),
  number: z.int().nullable(),
  state: campaignState,
  /** The screen's word: Measuring, Paused, Waiting, Halted … */
  word: z.string(),
  setAside: z.boolean(),
  origin: z.enum(["protocol", "import"]),
  priority: z.int(),
  rigId: z.string().nullable(),
  rig: z.string().nullable(),
  timeZone: z.string(),
  sensorId: z.string().nullable(),
  sensor: z.string().nullable(),
  protocolId: z.string().nullable(),
  protocolVersionId: z.string().nullable(),
  protocol: z.string().nullable(),
  version: z.int().nullable(),
  startAt: time.nullable(),
  startedAt: time.nullable(),
  endedAt: time.nullable(),
  /** On the rig's own clock. */
  startedClock: time.nullable(),
  endedClock: time.nullable(),
  cursor: z.string().nullable(),
  cycle: z.int(),
  progress: z.object({ repeats: z.int(), repeatsPlanned: z.int().nullable(), cycles: z.int().nullable() }),
  expectedEnd: expectedEnd.nullable(),
  /** Newest air reference against the baseline, ppm of f0. */
  shiftPpm: z.number().nullable(),
  /** The same in mHz with its standard uncertainty, and the half-width of the `return` limit. */
  air: z.object({ shiftMHz: z.number(), u: z.number().nullable(), limitMHz: z.number().nullable() }).nullable(),
  last: z.object({ f0Hz: z.number(), f0U: z.number().nullable(), q: z.number(), qU: z.number().nullable(), medium: z.string() }).nullable(),
});

export const campaignAnswer = campaignItem.extend({
  createdBy: z.string().nullable(),
  endText: z.string().nullable(),
  parking: z.enum(["none", "wanted", "running", "parked"]),
  holds: z.array(holdAnswer),
  slots: z.array(
    z.object({ slot: z.string(), port: z.int(), lotId: z.string(), lot: z.string(), liquidId: z.string(), liquid: z.string(), letter: z.string() }),
  ),
  /** Media of the phases so far, with how many repeats. */
  media: z.array(z.object({ medium: z.string(), repeats: z.int(), letter: z.string().nullable(), tint: tint.nullable(), name: z.string() })),
  amendments: z.array(z.object({ at: time, by: z.string(), fromVersion: z.int(), toVersion: z.int(), fromSequence: z.int(), why: z.string() })),
  setPointsC: z.array(z.number()),
  step: z
    .object({ sequence: z.int(), kind: z.string(), label: z.string(), state: z.string(), medium: z.string().nullable(), stored: z.int(), repeats: z.int().nullable(), dueAt: time.nullable() })
    .nullable(),
  /** How often a person has held, resumed or otherwise changed it is in the log. */
  lastContactAt: time.nullable(),
  clock: z.enum(["real", "simulated"]),
  now: time,
});

export const campaignPage = pageOf(campaignItem);

export const campaignQuery = pageQuery.extend({
  state: z.enum(["on-rigs", "in-line", "done", "draft"]).optional(),
  rigId: idSchema.optional(),
  sensorId: idSchema.optional(),
  protocolId: idSchema.optional(),
  search: z.string().trim().max(200).optional(),
  /** `line`: the order in which a rig takes what is queued. A minus turns a sort round. */
  sort: z.enum(["newest", "oldest", "name", "-name", "start", "-start", "end", "-end", "repeats", "-repeats", "line"]).default("newest"),
});

export const phaseItem = z.object({
  id: z.string(),
  cycle: z.int(),
  sequence: z.int(),
  medium: z.string(),
  role: z.enum(["reference", "check", "sample"]),
  setPointC: z.number().nullable(),
  mountId: z.string().nullable(),
  startedAt: time.nullable(),
  endedAt: time.nullable(),
  n: z.int(),
  nUsed: z.int(),
  f0: z.object({ mean: z.number().nullable(), sd: z.number().nullable(), u: z.number().nullable() }),
  q: z.object({ mean: z.number().nullable(), sd: z.number().nullable(), u: z.number().nullable() }),
  temperatureC: z.object({ mean: z.number().nullable(), sd: z.number().nullable() }),
  flags: z.record(z.string(), z.int()),
});

export const phasePage = pageOf(phaseItem);
export const phaseQuery = pageQuery.extend({ medium: z.string().max(60).optional(), role: z.enum(["reference", "check", "sample"]).optional(), fitRunId: idSchema.optional() });

export const campaignEvent = z.object({
  id: z.string(),
  at: z.string(),
  clock: z.string().nullable(),
  kind: z.string(),
  who: z.string(),
  text: z.string(),
  sequence: z.int().nullable(),
});

export const eventPage = pageOf(campaignEvent);

export type CampaignSort = CampaignQuery["sort"];
export type CampaignItem = z.output<typeof campaignItem>;
export type CampaignAnswer = z.output<typeof campaignAnswer>;
export type CampaignQuery = z.output<typeof campaignQuery>;
export type PhaseItem = z.output<typeof phaseItem>;
export type PhaseQuery = z.output<typeof phaseQuery>;
