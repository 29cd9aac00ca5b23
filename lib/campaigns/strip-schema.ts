import { z } from "zod";

const time = z.string();

export const stripSegment = z.object({
  kind: z.enum(["air", "fill", "liquid", "clean", "dry", "held", "wait", "end"]),
  from: time,
  to: time,
  planned: z.boolean().optional(),
  /** The slot whose liquid it is. */
  medium: z.string().optional(),
  cycle: z.int(),
  label: z.string(),
  repeats: z.int().optional(),
  taken: z.int().optional(),
  f0: z.object({ mean: z.number(), u: z.number().nullable() }).optional(),
  phaseId: z.string().optional(),
});

export const stripAnswer = z.object({
  from: time,
  to: time,
  /** By the rig's clock. */
  now: time,
  segments: z.array(stripSegment),
  halt: z.object({ at: time, open: z.boolean() }).optional(),
  /** Air references against the first, mHz. */
  trace: z.array(z.object({ at: time, value: z.number(), u: z.number().optional() })),
  /** Half-width of the `return` limit in the trace's unit. */
  limit: z.number().optional(),
});

export type StripSegment = z.output<typeof stripSegment>;
export type StripAnswer = z.output<typeof stripAnswer>;
