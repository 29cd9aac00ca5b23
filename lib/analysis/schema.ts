import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { instant } from "@/lib/schema";

const cycles = z
  .string()
  .regex(/^\d{1,7}(-\d{1,7})?$/, "is a cycle or a range of cycles, as 3 or 1-20")
  .transform((text) => text.split("-").map(Number))
  .transform(([from, to = from]) => ({ from, to }))
  .refine(({ from, to }) => from <= to, "the range begins after its end");

/** What of a campaign a question is about. */
export const selection = z.object({
  medium: z.string().min(1).max(60).optional(),
  setPointC: z.coerce.number().optional(),
  mountId: idSchema.optional(),
  fitRunId: idSchema.optional(),
  cycles: cycles.optional(),
});

const quantity = z.enum(["f0", "q"]);

export const seriesQuery = selection.extend({
  quantity: z.enum(["f0", "q", "temperature"]).default("f0"),
  points: z.coerce.number().int().min(10).max(5000).default(1000),
  from: instant.optional(),
  to: instant.optional(),
});

export const bucket = z.object({ from: z.string(), to: z.string(), min: z.number(), max: z.number(), mean: z.number(), n: z.int() });

export const seriesAnswer = z.object({
  unit: z.string(),
  /** Repeats that the buckets stand for, and those left out of them. */
  n: z.int(),
  leftOut: z.int(),
  buckets: z.array(bucket.extend({ phaseId: z.string(), cycle: z.int() })),
});

export const stabilityQuery = selection.extend({
  quantity: quantity.default("f0"),
  statistic: z.enum(["adev", "oadev", "mdev", "tdev", "hdev", "ohdev", "totdev"]).default("oadev"),
  view: z.enum(["within", "phases"]).default("within"),
  taus: z.enum(["octave", "decade", "all"]).default("octave"),
  confidence: z.coerce.number().min(0.5).max(0.9999).default(0.683),
  normalise: z.enum(["fractional", "absolute"]).default("fractional"),
});

export const stabilityAnswer = z.object({
  tau0S: z.number().nullable(),
  unit: z.string(),
  reference: z.number().nullable(),
  points: z.array(
    z.object({
      m: z.int(),
      tauS: z.number(),
      deviation: z.number(),
      lower: z.number(),
      upper: z.number(),
      n: z.int(),
      edf: z.number(),
      noise: z.string(),
      noiseMarked: z.string().optional(),
    }),
  ),
  /** What was used, in words. */
  used: z.string(),
});

export const driftQuery = selection.extend({ quantity: quantity.default("f0"), compensate: z.enum(["none", "temperature"]).default("none") });

const slope = z.object({ slopePerDay: z.number(), lower: z.number(), upper: z.number() });

export const driftAnswer = z.object({
  slopePerDay: z.number().nullable(),
  u: z.number().nullable(),
  ppmPerDay: z.number().nullable(),
  lower: z.number().nullable(),
  upper: z.number().nullable(),
  unit: z.string(),
  /** Value of the line at `from`. */
  intercept: z.number().nullable(),
  from: z.string().nullable(),
  to: z.string().nullable(),
  n: z.int(),
  leastSquares: slope.extend({ u: z.number() }).nullable(),
  theilSen: slope.nullable(),
  steps: z.array(z.object({ at: z.string(), size: z.number(), u: z.number() })),
  values: z.array(z.object({ at: z.string(), value: z.number(), u: z.number().nullable(), cycle: z.int(), phaseId: z.string() })),
  used: z.string(),
});

export const backToAirAnswer = z.object({
  items: z.array(
    z.object({
      cycle: z.int(),
      phaseId: z.string(),
      sequence: z.int(),
      at: z.string(),
      /** The medium measured before it. */
      after: z.string().nullable(),
      f0Hz: z.number(),
      u: z.number().nullable(),
      shiftPpm: z.number().nullable(),
      shiftU: z.number().nullable(),
      q: z.number().nullable(),
      qU: z.number().nullable(),
      qShiftPercent: z.number().nullable(),
      baselineHz: z.number().nullable(),
      /** f0 less the phase value in the course of the phase: at most 24 means, oldest first. */
      courseMHz: z.array(z.number().nullable()),
      baselineComplete: z.boolean(),
    }),
  ),
  baselineHz: z.number().nullable(),
  limitPpm: z.number().nullable(),
});

export type Selection = z.output<typeof selection>;
export type SeriesQuery = z.output<typeof seriesQuery>;
export type SeriesAnswer = z.output<typeof seriesAnswer>;
export type StabilityQuery = z.output<typeof stabilityQuery>;
export type StabilityAnswer = z.output<typeof stabilityAnswer>;
export type DriftQuery = z.output<typeof driftQuery>;
export type DriftAnswer = z.output<typeof driftAnswer>;
export type BackToAirAnswer = z.output<typeof backToAirAnswer>;
