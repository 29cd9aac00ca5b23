import { z } from "zod";
import { instant } from "@/lib/schema";

export const readingsQuery = z.object({
  format: z.enum(["json", "csv"]).default("json"),
  medium: z.string().min(1).max(60).optional(),
  cycle: z.coerce.number().int().min(0).optional(),
  from: instant.optional(),
  to: instant.optional(),
});

export type ReadingsQuery = z.output<typeof readingsQuery>;

export const sweepQuery = z.object({ sequence: z.coerce.number().int().min(1).optional(), index: z.coerce.number().int().min(0).optional() });

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
  /** Amplitude of the sweep and of the fitted curve, V, and what is left between them in units of the noise. */
  curve: z.object({ frequencyHz: z.array(z.number()), measuredV: z.array(z.number()), fittedV: z.array(z.number()) }).nullable(),
});

export type SweepAnswer = z.output<typeof sweepAnswer>;
