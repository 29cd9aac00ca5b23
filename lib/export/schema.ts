import { z } from "zod";
import { idSchema } from "@/lib/http/ids";

export const exportQuery = z.object({
  what: z.enum(["readings", "phases", "results"]).default("phases"),
  format: z.enum(["csv", "json", "xlsx"]).default("xlsx"),
  fitRunId: idSchema.optional(),
});

export type ExportQuery = z.output<typeof exportQuery>;
