import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { instant, words } from "@/lib/schema";

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
});

export type CampaignDraft = z.output<typeof campaignBody>;
export type CheckAnswer = z.output<typeof checkAnswer>;
export type CampaignProblem = z.output<typeof problem>;
