import { z } from "zod";
import { sweepSchema } from "./sweep-schema";

const seconds = (min: number, max: number) => z.number().min(min).max(max);
const whole = (min: number, max: number) => z.number().int().min(min).max(max);
const DAY_S = 86_400;

export const idSchema = z
  .string()
  .regex(/^[A-Za-z0-9][A-Za-z0-9_-]{0,63}$/, "An id is 1 to 64 letters, digits, - or _, and begins with a letter or digit");

/** A slot's name; `each` stands for the value of the enclosing `forEach`. */
const slotNameSchema = z
  .string()
  .regex(/^[^\s|](?:[^|\p{Cc}]{0,58}[^\s|])?$/u, "A slot is named by 1 to 60 characters, without | and without spaces at its ends");

const ownSlotSchema = slotNameSchema.refine((name) => name !== "air" && name !== "each", {
  error: "air and each are no slot names",
});

const fillableSlotSchema = slotNameSchema.refine((name) => name !== "air", { error: "air is no slot name" });
const mediumSchema = slotNameSchema.describe("`air`, a slot, or `each` inside a forEach over slots");
const temperatureSchema = z.number().min(-100).max(400);
const volumeSchema = z.number().positive().max(100_000);
const flowSchema = z.number().positive().max(10_000);
const idField = { id: idSchema.optional() };

export const measureSchema = z
  .strictObject({
    ...idField,
    kind: z.literal("measure"),
    medium: mediumSchema,
    role: z.enum(["reference", "check", "sample"]).optional(),
    repeats: whole(1, 100_000),
    discard: whole(0, 99_999).default(0),
    sweep: sweepSchema,
    pauseS: seconds(0, DAY_S).default(0),
    label: z.string().trim().min(1).max(120).optional(),
  })
  .refine(({ discard, repeats }) => discard < repeats, {
    path: ["discard"],
    error: "At least one repeat has to be left after discarding",
  });

export const fillSchema = z.strictObject({
  ...idField,
  kind: z.literal("fill"),
  slot: fillableSlotSchema,
  volumeMl: volumeSchema,
  flowMlPerMin: flowSchema,
});

export const drainSchema = z.strictObject({ ...idField, kind: z.literal("drain") });

export const rinseSchema = z.strictObject({
  ...idField,
  kind: z.literal("rinse"),
  slot: fillableSlotSchema,
  volumeMl: volumeSchema,
  times: whole(1, 100),
});

export const drySchema = z.strictObject({
  ...idField,
  kind: z.literal("dry"),
  seconds: seconds(1, 7 * DAY_S),
  flowMlPerMin: flowSchema.optional(),
});

export const settleSchema = z
  .strictObject({
    ...idField,
    kind: z.literal("settle"),
    temperatureC: z.union([temperatureSchema, z.literal("each")]),
    toleranceC: z.number().positive().max(50),
    holdS: seconds(0, 7 * DAY_S),
    timeoutS: seconds(1, 14 * DAY_S),
  })
  .refine(({ holdS, timeoutS }) => timeoutS > holdS, {
    path: ["timeoutS"],
    error: "The time-out has to be longer than the time to hold",
  });

export const waitSchema = z
  .strictObject({
    ...idField,
    kind: z.literal("wait"),
    seconds: seconds(1, 366 * DAY_S).optional(),
    until: z
      .strictObject({
        weekday: whole(1, 7).optional().describe("1 is Monday"),
        time: z.string().regex(/^([01]\d|2[0-3]):[0-5]\d$/, "A time is written HH:MM, from 00:00 to 23:59"),
      })
      .optional(),
  })
  .refine(({ seconds, until }) => (seconds === undefined) !== (until === undefined), {
    path: ["seconds"],
    error: "A wait has either seconds or until",
  });

export const askSchema = z.strictObject({
  ...idField,
  kind: z.literal("ask"),
  instruction: z.string().trim().min(1).max(2000),
  urgency: z.enum(["low", "normal", "high"]),
});

const repeatOwnSchema = z.strictObject({
  ...idField,
  kind: z.literal("repeat"),
  times: whole(1, 100_000_000).optional(),
  until: z.iso.date({ error: "A date is written YYYY-MM-DD" }).optional(),
});

const untilCleanOwnSchema = z.strictObject({
  ...idField,
  kind: z.literal("untilClean"),
  measure: measureSchema,
  tolerancePpm: z.number().positive().max(1_000_000),
  toleranceQPercent: z.number().positive().max(1000).optional(),
  maxTimes: whole(1, 100),
  otherwise: z.enum(["hold", "continue", "stop"]),
});

const forEachOwnSchema = z.strictObject({
  ...idField,
  kind: z.literal("forEach"),
  over: z.union(
    [
      z.strictObject({ slots: z.array(ownSlotSchema).min(1).max(200) }),
      z.strictObject({ temperaturesC: z.array(temperatureSchema).min(1).max(1000) }),
    ],
    { error: "forEach goes over either slots or temperaturesC, with names that are neither air nor each" },
  ),
});

const blocksSchema: z.ZodType<ParsedBlock[], BlockInput[]> = z.lazy(() =>
  z.array(blockSchema).min(1, "A block that holds blocks needs at least one"),
);

const repeatSchema = repeatOwnSchema
  .extend({ blocks: blocksSchema })
  .refine(({ times, until }) => (times === undefined) !== (until === undefined), {
    path: ["times"],
    error: "A repeat has either times or until",
  });

const untilCleanSchema = untilCleanOwnSchema.extend({ blocks: blocksSchema }).superRefine(({ measure }, context) => {
  if (measure.medium !== "air")
    context.addIssue({ code: "custom", path: ["measure", "medium"], message: "Cleanness is checked in air" });
  if (measure.role !== undefined && measure.role !== "check")
    context.addIssue({ code: "custom", path: ["measure", "role"], message: "The measurement of untilClean is a check" });
});

const forEachSchema = forEachOwnSchema.extend({ blocks: blocksSchema });

type LeafSchema =
  | typeof measureSchema
  | typeof fillSchema
  | typeof drainSchema
  | typeof rinseSchema
  | typeof drySchema
  | typeof settleSchema
  | typeof waitSchema
  | typeof askSchema;

type ContainerOwnSchema = typeof repeatOwnSchema | typeof untilCleanOwnSchema | typeof forEachOwnSchema;
/** A block as written: ids and defaults may be left out. */
export type BlockInput = z.input<LeafSchema> | (z.input<ContainerOwnSchema> & { blocks: BlockInput[] });

/** A block after parsing: defaults are in, ids may still be absent. */
export type ParsedBlock = z.output<LeafSchema> | (z.output<ContainerOwnSchema> & { blocks: ParsedBlock[] });

export const blockSchema: z.ZodType<ParsedBlock, BlockInput> = z
  .discriminatedUnion("kind", [
    measureSchema,
    fillSchema,
    drainSchema,
    rinseSchema,
    drySchema,
    settleSchema,
    waitSchema,
    askSchema,
    repeatSchema,
    untilCleanSchema,
    forEachSchema,
  ])
  .meta({ id: "Block" });
