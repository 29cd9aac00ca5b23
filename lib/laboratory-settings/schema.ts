import { z } from "zod";
import { timeZoneName, words } from "@/lib/schema";

export const laboratoryAnswer = z.object({
  name: z.string(),
  timeZone: z.string().describe("Of the clock over every page; each rig has its own"),
});

export const laboratoryBody = z
  .strictObject({ name: words(200).optional(), timeZone: timeZoneName.optional() })
  .refine(({ name, timeZone }) => name !== undefined || timeZone !== undefined, "give a name or a time zone");
