import { z } from "zod";

export const FOUND_KINDS = ["campaign", "sensor", "liquid", "lot", "rig", "protocol"] as const;

export const findQuery = z.object({
  q: z.string().trim().min(1, "is empty").max(100).describe("Words, each of which must occur; a campaign's number as C-118"),
  limit: z.coerce.number("must be a number").int().min(1).max(50).default(10).describe("Of each kind"),
});

export const foundAnswer = z.object({
  kind: z.enum(FOUND_KINDS),
  id: z.string(),
  name: z.string(),
  /** What else tells it from others: its number, sensor, rig, state. */
  note: z.string(),
  /** The page that shows it. */
  href: z.string(),
  retired: z.boolean(),
});

export const findAnswer = z.object({
  items: z.array(foundAnswer).describe("Best first: the same word, beginnings, then what holds the words somewhere"),
  totals: z.partialRecord(z.enum(FOUND_KINDS), z.int()).describe("How many there are of each kind that was found"),
});

export type FoundKind = (typeof FOUND_KINDS)[number];
export type Found = z.output<typeof foundAnswer>;
export type FindAnswer = z.output<typeof findAnswer>;
