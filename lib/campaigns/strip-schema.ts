import { z } from "zod";
import { tint } from "@/lib/campaigns/answers";
import { idSchema } from "@/lib/http/ids";

const time = z.string();

export const stripSegment = z.object({
  kind: z.enum(["air", "fill", "liquid", "clean", "dry", "held", "wait", "end"]),
  from: time,
  to: time,
  planned: z.boolean().optional(),
  /** The search for a resonance before a phase, not a phase. */
  find: z.boolean().optional(),
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
  /** By the rig's clock, while the campaign is under way. */
  now: time.optional(),
  segments: z.array(stripSegment),
  liquids: z.array(z.object({ slot: z.string(), name: z.string(), letter: z.string(), tint })),
  halt: z.object({ at: time, open: z.boolean() }).optional(),
  /** Air references against the baseline of their mount and set-point, or against the first while there is none, mHz. */
  trace: z.array(z.object({ at: time, phaseId: z.string(), value: z.number(), u: z.number().optional() })),
  /** Half-width of the `return` limit in the trace's unit. */
  limit: z.number().optional(),
});

export const stripsQuery = z.object({
  /** Up to 200 ids with commas between them. */
  ids: z
    .string()
    .transform((text) => text.split(","))
    .pipe(z.array(idSchema).min(1).max(200)),
});

export const stripsAnswer = z.object({ items: z.array(z.object({ campaignId: z.string(), strip: stripAnswer })) });

export type StripsAnswer = z.output<typeof stripsAnswer>;
export type StripSegment = z.output<typeof stripSegment>;
export type StripAnswer = z.output<typeof stripAnswer>;
