import { z } from "zod";
import { campaignQuery } from "@/lib/campaigns/answers";

export const overviewQuery = campaignQuery.pick({ state: true, rigId: true, sensorId: true, search: true });

const places = z.object({ "on-rigs": z.int(), "in-line": z.int(), done: z.int(), draft: z.int() });

export const overviewAnswer = z.object({
  /** All there are, and those that the filter shows. */
  total: z.int(),
  shown: z.int(),
  /** By place, with the filter but for its state. */
  places,
  /** How many would be shown with one word of the filter loosened. */
  without: z.object({ state: z.int(), rigId: z.int(), sensorId: z.int(), search: z.int() }),
  /** Over the whole laboratory, by the screen's words. */
  words: z.object({ measuring: z.int(), paused: z.int(), waiting: z.int(), halted: z.int(), queued: z.int() }),
  /** Rigs and sensors that have campaigns. */
  rigs: z.array(z.object({ id: z.string(), name: z.string() })),
  sensors: z.array(z.object({ id: z.string(), serial: z.string() })),
});

export type OverviewQuery = z.output<typeof overviewQuery>;
export type OverviewAnswer = z.output<typeof overviewAnswer>;
