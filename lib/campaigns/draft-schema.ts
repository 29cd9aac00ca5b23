import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { laneAnswer, laneCampaign } from "@/lib/rigs/timeline-schema";
import { instant, time, words } from "@/lib/schema";

const port = z.int().min(1).max(99);
const slots = z.record(z.string().min(1).max(60), z.strictObject({ port, lotId: idSchema }));
const priority = z.int().min(-100).max(100);

export const campaignBody = z.strictObject({
  protocolVersionId: idSchema,
  sensorId: idSchema,
  rigId: idSchema,
  slots,
  startAt: instant.optional().describe("Protocol time: on a simulated rig its own clock"),
  priority: priority.default(0),
  name: words(200).optional().describe("Made of protocol, sensor and rig unless given"),
});

export const campaignChange = z.strictObject({
  protocolVersionId: idSchema.optional(),
  sensorId: idSchema.optional(),
  rigId: idSchema.optional(),
  slots: slots.optional(),
  startAt: instant.nullable().optional(),
  priority: priority.optional(),
  name: words(200).optional(),
});

export const queueBody = z.strictObject({ acknowledgements: z.array(z.string().min(1).max(200)).max(200).default([]) });

export const moveBody = z.strictObject({ before: idSchema.nullable().describe("The queued campaign of the same rig that it is to stand before; null: at the end of the line") });
export const movedAnswer = z.object({
  id: z.string(),
  /** Ids of the rig's queued campaigns, first first. */
  line: z.array(z.string()),
});

export const campaignCreated = z.object({ id: z.string(), name: z.string() });

const problem = z.object({ path: z.string(), severity: z.enum(["error", "warning"]), message: z.string() });
const caution = z.object({ code: z.string(), title: z.string(), what: z.array(z.string()), where: z.string(), message: z.string() });

/** What a campaign would be like, before anybody makes it. */
export const checkAnswer = z.object({
  estimate: z.object({
    seconds: z.number(),
    lowS: z.number(),
    highS: z.number(),
    steps: z.number(),
    repeats: z.number(),
    cycles: z.number(),
    wasteMl: z.number(),
    people: z.number(),
  }),
  slots: z.array(z.object({ slot: z.string(), neededMl: z.number(), port: z.int().nullable(), loadedMl: z.number().nullable() })),
  problems: z.array(problem),
  cautions: z.array(caution),
  /** Its rig's next weeks with it in them (its id there is empty), and when it needs a person. */
  forecast: z.object({ lane: laneAnswer, from: time, end: laneCampaign.shape.end, people: z.array(z.object({ at: time, label: z.string() })) }).nullable(),
});

/** What a campaign can be made of; the newest 500 of each. */
export const choicesAnswer = z.object({
  versions: z.array(z.object({ id: z.string(), protocolId: z.string(), name: z.string(), version: z.int(), savedAt: time, savedBy: z.string().nullable(), slots: z.array(z.string()) })),
  sensors: z.array(z.object({ id: z.string(), serial: z.string(), kind: z.string(), rigId: z.string().nullable() })),
  rigs: z.array(
    z.object({
      id: z.string(),
      name: z.string(),
      timeZone: z.string(),
      wasteCapacityMl: z.number().nullable(),
      ports: z.array(z.object({ number: z.int(), lotId: z.string().nullable(), remainingMl: z.number() })),
      ahead: z.int(),
    }),
  ),
  lots: z.array(z.object({ id: z.string(), code: z.string(), liquidName: z.string(), letter: z.string(), tint: z.union([z.literal(1), z.literal(2), z.literal(3)]), expiresAt: time.nullable() })),
});

export type Choices = z.output<typeof choicesAnswer>;
export type CampaignDraft = z.output<typeof campaignBody>;
export type CheckAnswer = z.output<typeof checkAnswer>;
export type CampaignInput = z.input<typeof campaignBody>;
export type CampaignProblem = z.output<typeof problem>;
