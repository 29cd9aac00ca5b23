import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { instant, time, words } from "@/lib/schema";

export const mountBody = z.strictObject({
  rigId: idSchema,
  position: z.int().min(1).max(99).default(1),
  mountedAt: instant.optional(),
  note: words(2000).optional(),
});

export const endMountBody = z.strictObject({ endedAt: instant.optional(), note: words(2000).optional() });

export const mountQuery = pageQuery.extend({ open: z.enum(["true", "false"]).optional() });

export const mountAnswer = z.object({
  id: z.string(),
  sensorId: z.string(),
  serial: z.string(),
  rigId: z.string(),
  rigName: z.string(),
  position: z.int(),
  from: time,
  to: time.nullable(),
  mountedBy: z.string().nullable(),
  endedBy: z.string().nullable(),
  note: z.string().nullable(),
});

export const mountPage = pageOf(mountAnswer);

export type MountAnswer = z.output<typeof mountAnswer>;
export type MountQuery = z.output<typeof mountQuery>;
