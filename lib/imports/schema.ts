import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { FIELD_NAMES, fieldInfo } from "@/lib/imports/fields";
import { TIME_FORMATS, type TimeFormat } from "@/lib/imports/parse-time";
import { timeZoneName, words } from "@/lib/schema";

const field = z.enum(FIELD_NAMES as [(typeof FIELD_NAMES)[number], ...(typeof FIELD_NAMES)[number][]]);

const columnUse = z
  .strictObject({ field, unit: z.string().max(40).optional() })
  .refine(({ field: name, unit }) => unit === undefined || fieldInfo(name).units.some((one) => one.name === unit), { path: ["unit"], message: "is no unit that this field can be in" });

/** By the column's name in the file: the field, the field with its unit, or null for a column to leave out. */
export const mappingSchema = z.record(z.string().min(1).max(200), z.union([field.transform((name) => ({ field: name, unit: undefined })), columnUse, z.null()]));

const timeFormat = z.enum(Object.keys(TIME_FORMATS) as [TimeFormat, ...TimeFormat[]]);

export const formatSchema = z.strictObject({
  delimiter: z.enum([",", ";", "\t", "|"]).optional().meta({ description: "Found from the first lines unless given" }),
  decimal: z.enum([".", ","]).default("."),
  encoding: z.enum(["utf-8", "utf-16le", "utf-16be", "windows-1252"]).optional().meta({ description: "Found from the first bytes unless given" }),
  headerLine: z.int().min(1).max(1000).optional().meta({ description: "The line with the names of the columns; the first that is not blank and does not begin with # unless given" }),
  firstLine: z.int().min(2).max(1001).optional().meta({ description: "The first line with values, where lines lie between; the one after the header unless given" }),
  timeFormat: timeFormat.default("iso"),
  timeZone: timeZoneName.default("UTC").meta({ description: "Of times without an offset" }),
  medium: words(60).optional().meta({ description: "Of every row, where no column names it" }),
  readout: z.enum(["velocity", "displacement"]).optional().meta({ description: "What raw sweeps were read as; the sensor's unless given, else velocity" }),
  gaps: z.enum(["refuse", "keep"]).default("refuse").meta({ description: "keep: a row without f0 or Q is a failed repeat" }),
});

export const importFields = z.strictObject({
  name: words(200),
  sensorId: idSchema.optional(),
  mapping: mappingSchema.default({}),
  format: formatSchema.prefault({}),
});

export type Mapping = z.output<typeof mappingSchema>;
export type Format = z.output<typeof formatSchema>;
export type ImportFields = z.output<typeof importFields>;

const time = z.string();

export const importAnswer = z.union([
  z.object({ campaignId: z.string(), imported: z.int(), ignored: z.array(z.string()).optional(), alreadyImported: z.boolean().optional() }),
  z.object({ importRunId: z.string(), campaignId: z.string() }),
]);

export const importRunAnswer = z.object({
  id: z.string(),
  name: z.string(),
  fileName: z.string(),
  sizeBytes: z.int(),
  state: z.enum(["receiving", "waiting", "running", "done", "refused", "cancelled"]),
  /** The id that the campaign has, or will have when the import is done. */
  campaignId: z.string(),
  readBytes: z.int(),
  rowsRead: z.int(),
  rowsStored: z.int(),
  phases: z.int(),
  problem: z.object({ detail: z.string(), errors: z.array(z.object({ path: z.string(), message: z.string() })), errorCount: z.int() }).nullable(),
  by: z.string(),
  createdAt: time,
  startedAt: time.nullable(),
  endedAt: time.nullable(),
  cancelWanted: z.boolean(),
  now: time,
});

export const importPage = pageOf(importRunAnswer);
export const importQuery = pageQuery;

export type ImportAnswer = z.output<typeof importAnswer>;
export type ImportRunAnswer = z.output<typeof importRunAnswer>;
