import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { FLAGS, flagNames, LEFT_OUT, type Flag } from "@/lib/numerics/resonance/flags";
import { instant } from "@/lib/schema";

const cycles = z
  .string()
  .regex(/^\d{1,7}(-\d{1,7})?$/, "is a cycle or a range of cycles, as 3 or 1-20")
  .transform((text) => text.split("-").map(Number))
  .transform(([from, to = from]) => ({ from, to }))
  .refine(({ from, to }) => from <= to, "the range begins after its end");

const DEFAULT_LEAVE_OUT = flagNames(LEFT_OUT).join(",");

const isFlag = (text: string): text is Flag => (FLAGS as readonly string[]).includes(text);

/** Flags that leave a reading out, in the order of their bits: `failed,edge`, or `none`. */
const leaveOut = z
  .string()
  .regex(/^[a-z]+(,[a-z]+)*$/, `is none or a list of ${FLAGS.join(", ")}`)
  .default(DEFAULT_LEAVE_OUT)
  .transform((text) => (text === "none" ? [] : text.split(",")))
  .refine((names) => names.every(isFlag), `is none or a list of ${FLAGS.join(", ")}`)
  .transform((names) => FLAGS.filter((flag) => names.includes(flag)));

const compensate = z.enum(["none", "temperature"]).default("none");

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
  compensate,
  leaveOut,
  /** Whether points within phases are freed of the pauses between repeats, where these are not negligible. */
  deadTime: z.enum(["stated", "corrected"]).default("stated"),
});

/** How values were brought to one temperature, or why they could not be. Coefficients at `referenceC`, in values per K, per K², the lag in days. */
export const compensation = z.object({
  applied: z.boolean(),
  model: z.enum(["none", "linear", "quadratic", "linear with lag", "quadratic with lag"]).nullable(),
  referenceC: z.number().nullable(),
  terms: z.array(z.object({ name: z.enum(["linear", "quadratic", "lag"]), value: z.number(), u: z.number() })),
  /** The drift that was fitted together with the coefficients. */
  driftPerDay: z.number().nullable(),
  driftU: z.number().nullable(),
  /** Share by which the thermometer's scatter makes the linear coefficient too small; its doubt is in `u`. */
  attenuation: z.number().nullable(),
  n: z.int(),
  used: z.string(),
});

const parts = z.object({ white: z.number(), flicker: z.number(), randomWalk: z.number(), driftPerS: z.number() });
/** Null where the curve has too few points to say. */
const partsU = z.object({ white: z.number().nullable(), flicker: z.number().nullable(), randomWalk: z.number().nullable(), driftPerS: z.number().nullable() });

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
      /** What the uncertainty of a temperature compensation can add to the deviation. */
      compensationU: z.number().optional(),
    }),
  ),
  /** What was used, in words. */
  used: z.string(),
  /** Parts of the overlapping Allan variance with their standard uncertainties, and the averaging time of least deviation with those as good within 5 %. */
  parts: parts.extend({ u: partsU, best: z.object({ tauS: z.number(), deviation: z.number(), fromS: z.number(), toS: z.number() }) }).nullish(),
  /** Readings by why they do not count, and flagged ones that do; within phases. */
  readings: z.object({ n: z.int(), used: z.int(), reasons: z.record(z.string(), z.int()), flaggedButUsed: z.record(z.string(), z.int()) }).nullish(),
  /** Pauses between repeats: spacing over length of one, share of time without measuring, the largest effect on a point, what was done. */
  deadTime: z
    .object({
      repeatS: z.number(),
      r: z.number(),
      deadShare: z.number(),
      largestEffect: z.number().nullable(),
      treatment: z.enum(["none", "negligible", "corrected", "stated", "not available"]),
    })
    .nullish(),
  compensation: compensation.nullish(),
});

export const driftQuery = selection.extend({ quantity: quantity.default("f0"), compensate });

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
  /** Mean exponent of the noise about the line: 0 white, −1 flicker, −2 random walk. */
  alpha: z.number().nullish(),
  mannKendall: z.object({ s: z.int(), z: z.number(), p: z.number(), exactP: z.number().nullable(), tau: z.number() }).nullish(),
  /** `a + b ln(1 + t/τ)` from the first value on; its AICc less that of a line is below 0 where it is preferred. */
  ageing: z.object({ a: z.number(), b: z.number(), tauDays: z.number(), aiccDifference: z.number(), preferred: z.enum(["ageing", "line"]) }).nullish(),
  steps: z.array(z.object({ at: z.string(), size: z.number(), u: z.number() })),
  values: z.array(
    z.object({
      at: z.string(),
      value: z.number(),
      u: z.number().nullable(),
      cycle: z.int(),
      phaseId: z.string(),
      sequence: z.int().optional(),
      temperatureC: z.number().nullish(),
      /** What a compensation adds to the uncertainty of all values together. */
      commonU: z.number().nullish(),
    }),
  ),
  used: z.string(),
  compensation: compensation.nullish(),
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

export const airReturnQuery = selection.omit({ medium: true });

/** Whether the air reference comes back and what keeps it away, and how the sensor cools after drying. */
export const airReturnAnswer = z.object({
  verdict: z.enum(["none", "residue", "ageing", "undecided", "step", "too few"]),
  n: z.int(),
  /** Growth over the record: of f0 in ppm, of Q in percent, and the loss factor of what grew. */
  growth: z
    .object({
      f0PpmPerDay: z.number(),
      f0U: z.number(),
      qPercentPerDay: z.number(),
      qU: z.number(),
      totalPpm: z.number(),
      lossFactor: z.number().nullable(),
      lossFactorU: z.number().nullable(),
      q: z.enum(["falls", "quiet", "rises", "unclear"]),
    })
    .nullable(),
  steps: z.array(z.object({ at: z.string(), f0Ppm: z.number(), f0U: z.number(), qPercent: z.number(), qU: z.number() })),
  cleanedAgain: z.object({ times: z.int(), takesOff: z.enum(["yes", "no", "unclear", "untried"]), share: z.number().nullable(), shareU: z.number().nullable() }),
  cooling: z
    .object({
      preferred: z.enum(["none", "line", "exponential", "exponential and line"]),
      /** Of the exponential return at the end of drying, Hz; its time constant in s. */
      transient: z.object({ amplitude: z.number(), amplitudeU: z.number(), tauS: z.number(), tauU: z.number(), isSignificant: z.boolean() }).nullable(),
      /** Leading repeats to leave out; null where half a phase would not be enough. */
      discard: z.object({ repeats: z.int().nullable(), waitS: z.number(), biasLeft: z.number(), tolerance: z.number() }),
      phases: z.int(),
      n: z.int(),
    })
    .nullable(),
  used: z.string(),
});

export type AirReturnQuery = z.output<typeof airReturnQuery>;
export type AirReturnAnswer = z.output<typeof airReturnAnswer>;
export type Selection = z.output<typeof selection>;
export type SeriesQuery = z.output<typeof seriesQuery>;
export type SeriesAnswer = z.output<typeof seriesAnswer>;
export type CompensationAnswer = z.output<typeof compensation>;
export type StabilityQuery = z.output<typeof stabilityQuery>;
export type StabilityAnswer = z.output<typeof stabilityAnswer>;
export type DriftQuery = z.output<typeof driftQuery>;
export type DriftAnswer = z.output<typeof driftAnswer>;
export type BackToAirAnswer = z.output<typeof backToAirAnswer>;
