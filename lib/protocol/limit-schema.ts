import { z } from "zod";
import { idSchema } from "./block-schema";

const common = {
  id: idSchema.optional(),
  does: z
    .array(z.enum(["note", "mail", "hold", "cleanAgain", "stop"]))
    .min(1, "A limit does at least one thing")
    .refine((does) => new Set(does).size === does.length, { error: "Each thing is named once" }),
  medium: z.string().min(1).max(60).optional(),
  deadTimeS: z.number().min(0).max(366 * 86_400).optional(),
  clearAt: z.number().positive().max(1).default(0.8),
  minPhases: z.number().int().min(1).max(100_000).optional(),
  falseAlarmsPerYear: z.number().positive().max(1000).default(1),
  maxTimes: z.number().int().min(1).max(100).default(2).describe("How often cleanAgain cleans before it holds"),
};
const quantity = z.enum(["f0", "q"]);

const returnLimitSchema = z
  .strictObject({
    ...common,
    kind: z.literal("return"),
    tolerancePpm: z.number().positive().max(1_000_000).optional(),
    toleranceQPercent: z.number().positive().max(1000).optional(),
  })
  .refine(({ tolerancePpm, toleranceQPercent }) => tolerancePpm !== undefined || toleranceQPercent !== undefined, {
    path: ["tolerancePpm"],
    error: "A return limit needs tolerancePpm, toleranceQPercent or both",
  });

const driftLimitSchema = z
  .strictObject({
    ...common,
    kind: z.literal("drift"),
    quantity,
    ppmPerDay: z.number().positive().max(1_000_000).optional(),
    crossesPpm: z.number().positive().max(1_000_000).optional(),
    withinDays: z.number().positive().max(3660).optional(),
  })
  .superRefine(({ ppmPerDay, crossesPpm, withinDays }, context) => {
    const issue = (path: string, message: string) => context.addIssue({ code: "custom", path: [path], message });
    if (ppmPerDay !== undefined && (crossesPpm !== undefined || withinDays !== undefined))
      issue("ppmPerDay", "A drift limit has either ppmPerDay, or crossesPpm with withinDays");
    else if (ppmPerDay === undefined && crossesPpm === undefined)
      issue("ppmPerDay", "A drift limit needs ppmPerDay, or crossesPpm with withinDays");
    else if (ppmPerDay === undefined && withinDays === undefined)
      issue("withinDays", "crossesPpm needs withinDays");
  });

const temperatureLimitSchema = z
  .strictObject({
    ...common,
    kind: z.literal("temperature"),
    minC: z.number().min(-273.15).max(1000),
    maxC: z.number().min(-273.15).max(1000),
  })
  .refine(({ minC, maxC }) => minC < maxC, { path: ["maxC"], error: "maxC has to lie above minC" });

/** A rule over readings or phases, and what happens when it is broken. */
export const limitSchema = z
  .discriminatedUnion("kind", [
    returnLimitSchema,
    driftLimitSchema,
    z.strictObject({ ...common, kind: z.literal("step"), quantity, sigma: z.number().positive().max(1000) }),
    z.strictObject({ ...common, kind: z.literal("noise"), quantity, factor: z.number().gt(1).max(1_000_000) }),
    z.strictObject({ ...common, kind: z.literal("fit"), sharePercent: z.number().positive().lt(100) }),
    temperatureLimitSchema,
    z.strictObject({ ...common, kind: z.literal("silence"), afterS: z.number().min(1).max(366 * 86_400) }),
    z.strictObject({ ...common, kind: z.literal("count"), failedSteps: z.number().int().min(1).max(1000) }),
  ])
  .meta({ id: "Limit" });
