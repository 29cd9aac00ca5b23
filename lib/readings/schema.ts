import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { RESONANCE_PARAMETERS } from "@/lib/numerics/resonance/types";
import { instant } from "@/lib/schema";

export const readingsQuery = z.object({
  format: z.enum(["json", "csv"]).default("json"),
  medium: z.string().min(1).max(60).optional(),
  cycle: z.coerce.number().int().min(0).optional(),
  from: instant.optional(),
  to: instant.optional(),
});

export type ReadingsQuery = z.output<typeof readingsQuery>;

export const sweepQuery = z.object({
  sequence: z.coerce.number().int().min(1).optional(),
  index: z.coerce.number().int().min(0).optional(),
  /** In place of sequence and index: the repeat of a medium that was taken nearest to that time. */
  medium: z.string().min(1).max(60).optional(),
  at: instant.optional(),
  fitRunId: idSchema.optional(),
});

const place = z.object({ sequence: z.int(), index: z.int() });
const value = z.object({ mean: z.number(), u: z.number() }).nullable();

/** A repeat in its phase; given when it was asked for by sequence and index. */
export const sweepPlace = z.object({
  phaseId: z.string(),
  role: z.string(),
  /** Stored so far, and planned. */
  n: z.int(),
  repeats: z.int(),
  discard: z.int(),
  previous: place.nullable(),
  next: place.nullable(),
  nextFlagged: place.nullable(),
  /** f0 of the repeats by index; of very long phases the extremes of neighbours. */
  values: z.array(z.object({ index: z.int(), f0Hz: z.number(), leftOut: z.boolean() })),
  f0: value,
  q: value,
  /** A person's exclusion of this repeat. */
  excluded: z.object({ id: z.string(), by: z.string(), at: z.string(), why: z.string() }).nullable(),
  /** What the phase value would be with this repeat left out, or, where a person has left it out, taken back in. */
  otherwise: z.object({ f0: value, q: value }),
});

export const sweepAnswer = z.object({
  sequence: z.int(),
  index: z.int(),
  medium: z.string(),
  cycle: z.int(),
  takenAt: z.string(),
  points: z.int(),
  f0Hz: z.number().nullable(),
  f0StdHz: z.number().nullable(),
  q: z.number().nullable(),
  qStd: z.number().nullable(),
  flags: z.array(z.string()),
  /**
   * Amplitude of the sweep and of the fitted curve, V; of a sweep with phase its parts in phase and in quadrature too, and those of
   * the fitted curve. `fitted…` is empty where nothing could be fitted.
   */
  curve: z
    .object({
      frequencyHz: z.array(z.number()),
      measuredV: z.array(z.number()),
      fittedV: z.array(z.number()),
      re: z.array(z.number()).optional(),
      im: z.array(z.number()).optional(),
      fittedRe: z.array(z.number()).optional(),
      fittedIm: z.array(z.number()).optional(),
    })
    .nullable(),
  form: z.enum(["sweep", "magnitude", "ringDown", "fitted"]).optional(),
  readout: z.enum(["velocity", "displacement"]).nullish(),
  fitRunId: z.string().nullish(),
  durationS: z.number().nullish(),
  temperatureC: z.number().nullish(),
  pressurePa: z.number().nullish(),
  humidityPercent: z.number().nullish(),
  dwellS: z.number().nullish(),
  driveV: z.number().nullish(),
  /** Resonance term over noise in each quadrature. */
  snr: z.number().nullish(),
  noiseV: z.number().nullish(),
  /** f0 and Q, of a sweep with phase also resonance a, offset b and its slope c, each in phase and in quadrature, V. */
  parameters: z.array(z.object({ name: z.enum(RESONANCE_PARAMETERS), value: z.number(), u: z.number().nullable(), correlationWithF0: z.number().nullable() })).optional(),
  /** What flags are judged by. */
  judged: z.object({ spanHalfWidths: z.number(), pointsInBand: z.int(), lag1: z.number(), lag1Limit: z.number(), dwellRingDowns: z.number().nullable() }).nullish(),
  place: sweepPlace.nullish(),
});

export type SweepQuery = z.output<typeof sweepQuery>;
export type SweepPlace = z.output<typeof sweepPlace>;
export type SweepAnswer = z.output<typeof sweepAnswer>;
