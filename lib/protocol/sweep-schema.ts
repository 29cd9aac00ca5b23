import { z } from "zod";

const frequencySchema = z.number().positive().max(1e9);

/** How one repeat is swept. The span is the total; a half-width is f0/(2Q), a ring-down Q/(π f0). */
export const sweepSchema = z.strictObject({
  centre: z.union([z.literal("track"), frequencySchema], { error: "The centre is track or a frequency in Hz" }),
  span: z.union(
    [
      z.strictObject({ halfWidths: z.number().positive().max(10_000) }),
      z.strictObject({ hz: frequencySchema }),
    ],
    { error: "The span has either halfWidths or hz" },
  ),
  points: z.number().int().min(11).max(4001),
  dwell: z.union(
    [
      z.strictObject({ ringDowns: z.number().positive().max(1000) }),
      z.strictObject({ s: z.number().positive().max(3600) }),
    ],
    { error: "The dwell has either ringDowns or s" },
  ),
  driveV: z.number().positive().max(100),
});

/** The wide sweep of a `find` step. */
export const searchSchema = z
  .strictObject({
    fromHz: frequencySchema,
    toHz: frequencySchema,
    points: z.number().int().min(11).max(4001),
  })
  .refine(({ fromHz, toHz }) => fromHz < toHz, { path: ["toHz"], error: "toHz has to lie above fromHz" });
