import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { words } from "@/lib/schema";

/** Repeats of one phase that are not to count. */
export const excludeBody = z.strictObject({
  phaseId: idSchema,
  indices: z.array(z.int().min(0)).min(1).max(10_000),
  why: words(2000),
});

export const takeBackBody = z.strictObject({ why: words(2000) });

const phaseAfter = z.object({
  phaseId: z.string(),
  n: z.int(),
  nUsed: z.int(),
  f0: z.object({ mean: z.number().nullable(), u: z.number().nullable() }),
  q: z.object({ mean: z.number().nullable(), u: z.number().nullable() }),
});

/** The exclusions made, and what the phase value has become. */
export const excludeAnswer = z.object({ ids: z.array(z.string()), phase: phaseAfter });

export const takeBackAnswer = z.object({ id: z.string(), phase: phaseAfter });

export type PhaseAfter = z.output<typeof phaseAfter>;

export const exclusionItem = z.object({
  id: z.string(),
  phaseId: z.string(),
  sequence: z.int(),
  cycle: z.int(),
  medium: z.string(),
  index: z.int(),
  by: z.string(),
  at: z.string(),
  why: z.string(),
  takenBackBy: z.string().nullable(),
  takenBackAt: z.string().nullable(),
});

export type ExclusionItem = z.output<typeof exclusionItem>;
