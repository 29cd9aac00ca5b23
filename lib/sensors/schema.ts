import { z } from "zod";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { time, words } from "@/lib/schema";

const kind = z.enum(["wire", "tube", "fork", "plate"]);
const readout = z.enum(["velocity", "displacement"]);
const frequencyHz = z.number().positive("must be above 0").max(1e9);
const q = z.number().positive("must be above 0").max(1e9);
const radiusM = z.number().positive("must be above 0").max(1);

export const sensorBody = z.strictObject({
  serial: words(100),
  kind,
  readout: readout.default("velocity"),
  nominalF0Hz: frequencyHz,
  nominalQ: q,
  radiusM: radiusM.optional(),
  note: words(2000).optional(),
});

/** Serial number and kind are the sensor itself and stay. */
export const sensorChange = z.strictObject({
  readout: readout.optional(),
  nominalF0Hz: frequencyHz.optional(),
  nominalQ: q.optional(),
  radiusM: radiusM.nullable().optional(),
  note: words(2000).nullable().optional(),
  retired: z.boolean().optional(),
});

export const sensorQuery = pageQuery.extend({ retired: z.enum(["true", "false"]).default("false"), search: z.string().max(100).optional() });

export const sensorAnswer = z.object({
  id: z.string(),
  serial: z.string(),
  kind,
  readout,
  nominalF0Hz: z.number(),
  nominalQ: z.number(),
  radiusM: z.number().nullable(),
  note: z.string().nullable(),
  mount: z.object({ id: z.string(), rigId: z.string(), rigName: z.string(), position: z.int(), since: time }).nullable(),
  /** The campaign that it is in now. */
  campaign: z.object({ id: z.string(), name: z.string(), state: z.enum(["running", "held"]) }).nullable(),
  campaigns: z.int(),
  createdAt: time,
  retiredAt: time.nullable(),
});

export const sensorPage = pageOf(sensorAnswer);

export type SensorAnswer = z.output<typeof sensorAnswer>;
export type SensorQuery = z.output<typeof sensorQuery>;
