import { z } from "zod";
import { words } from "@/lib/schema";

/** How every sweep of a campaign is fitted again. */
export const refitBody = z.strictObject({
  /** Whether the offset may have a slope over the sweep. */
  offsetSlope: z.boolean().default(true),
  /** In place of the protocol's. */
  readout: z.enum(["velocity", "displacement"]).optional(),
  why: words(2000),
});

export type RefitBody = z.output<typeof refitBody>;

export const fitRunAnswer = z.object({
  id: z.string(),
  campaignId: z.string(),
  current: z.boolean(),
  state: z.enum(["waiting", "ready", "cancelled"]),
  settings: z.object({ offsetSlope: z.boolean(), readout: z.enum(["velocity", "displacement"]).optional() }),
  codeVersion: z.string(),
  /** Readings to fit, and those fitted so far; of the run that the campaign began with, all that were measured. */
  total: z.int(),
  done: z.int(),
  why: z.string().nullable(),
  by: z.string().nullable(),
  createdAt: z.string(),
  finishedAt: z.string().nullable(),
  /** Limits that its values break; they become alarms when it is made current, unless the same was told before. */
  found: z.array(z.object({ limitId: z.string(), kind: z.string(), cycle: z.int(), text: z.string() })),
});

export type FitRunAnswer = z.output<typeof fitRunAnswer>;

export const fitRunList = z.object({ items: z.array(fitRunAnswer) });

export const compareQuery = z.object({ with: z.string().regex(/^[1-9]\d{0,17}$/, "is not an id").optional() });

const value = z.object({ mean: z.number().nullable(), u: z.number().nullable() });
const side = z.object({ nUsed: z.int(), f0: value, q: value, flags: z.record(z.string(), z.int()) });

/** Two fit runs of a campaign beside each other, phase by phase. */
export const comparison = z.object({
  /** The run asked for, and the one it is held against: the current unless named. */
  fitRunId: z.string(),
  withFitRunId: z.string(),
  phases: z.array(
    z.object({ phaseId: z.string(), sequence: z.int(), cycle: z.int(), medium: z.string(), role: z.string(), startedAt: z.string().nullable(), ours: side, theirs: side }),
  ),
  /** By medium: mean change of the phase values, of f0 in ppm and of Q in percent, and how it scatters. */
  changes: z.array(z.object({ medium: z.string(), n: z.int(), f0Ppm: z.number(), f0PpmSd: z.number().nullable(), qPercent: z.number(), qPercentSd: z.number().nullable() })),
});

export type Comparison = z.output<typeof comparison>;
