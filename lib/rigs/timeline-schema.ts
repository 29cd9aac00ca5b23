import { z } from "zod";
import { stripAnswer } from "@/lib/campaigns/strip-schema";
import { time } from "@/lib/schema";

const expected = z.object({
  at: time,
  /** Likely range; none while the campaign is held, when `at` is what it would be if it went on now. */
  range: z.object({ earliest: time, latest: time }).nullable(),
});

export const laneCampaign = z.object({
  /** Empty for the campaign that is being put together. */
  id: z.string(),
  name: z.string(),
  sensor: z.string(),
  /** The screen's word. */
  word: z.string(),
  queued: z.boolean(),
  /** It begins no earlier. */
  startAt: time.nullable(),
  /** What the whole of it takes, by its estimate. */
  seconds: z.number(),
  lowS: z.number(),
  highS: z.number(),
  from: time,
  end: expected,
  strip: stripAnswer.pick({ segments: true, liquids: true, halt: true }),
});

/** One rig's weeks: what is on it, what waits for it in the order of the line, and when it is blocked. */
export const laneAnswer = z.object({
  rigId: z.string(),
  name: z.string(),
  timeZone: z.string(),
  /** By the rig's clock. */
  now: time,
  from: time,
  to: time,
  campaigns: z.array(laneCampaign),
  blocked: z.array(z.object({ id: z.string(), from: time, to: time, why: z.string() })),
  /** When nothing more is planned; null while that hangs on a held campaign. */
  freeFrom: time.nullable(),
  /** What the campaign on the rig and those in line still take of each port, and add to the waste. */
  needs: z.object({ ports: z.array(z.object({ port: z.int(), ml: z.number(), inLineMl: z.number() })), wasteMl: z.number(), inLineWasteMl: z.number() }),
});

export const timelineAnswer = z.object({ items: z.array(laneAnswer) });

export type LaneAnswer = z.output<typeof laneAnswer>;
export type LaneCampaign = z.output<typeof laneCampaign>;
export type TimelineAnswer = z.output<typeof timelineAnswer>;
