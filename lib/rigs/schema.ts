import { z } from "zod";
import { idSchema } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { instant, time, timeZoneName, words } from "@/lib/schema";

const volumeMl = z.number().positive("must be above 0").max(1_000_000);
const port = z.int().min(1).max(99);

export const rigBody = z.strictObject({
  name: words(200),
  timeZone: timeZoneName,
  ports: z.int().min(0).max(99),
  clock: z.enum(["real", "simulated"]).default("real"),
  wasteCapacityMl: volumeMl.optional(),
});

/** The clock stays what it was: the times of everything the rig has done depend on it. */
export const rigChange = z.strictObject({
  name: words(200).optional(),
  timeZone: timeZoneName.optional(),
  ports: z.int().min(0).max(99).optional(),
  wasteCapacityMl: volumeMl.nullable().optional(),
  retired: z.boolean().optional(),
});

export const rigQuery = pageQuery.extend({ retired: z.enum(["true", "false"]).default("false") });

export const tokenBody = z.strictObject({ name: words(200) });
export const tokenCreated = z.object({ id: z.string(), token: z.string() });
export const rigTokenParams = z.object({ id: idSchema, tokenId: idSchema });

export const takeOverBody = z.strictObject({ why: words(2000).optional() });
export const giveBackBody = z.strictObject({ note: words(2000).optional() });

export const loadBody = z.strictObject({
  port,
  lotId: idSchema,
  volumeMl,
  how: z.enum(["replace", "topUp"]),
  confirm: z.boolean().optional().describe("true: yes, another lot of the same liquid in mid-campaign"),
});

export const blockTimeBody = z.strictObject({
  from: instant,
  to: instant,
  why: words(500),
});

const bottle = z.object({
  loadId: z.string(),
  lotId: z.string(),
  lotCode: z.string(),
  expiresAt: time.nullable(),
  liquidId: z.string(),
  liquidName: z.string(),
  letter: z.string(),
  tint: z.union([z.literal(1), z.literal(2), z.literal(3)]),
  /** What the bottle held when it was put there or, after a top up, the most that is known. */
  fullMl: z.number(),
  loadedAt: time,
});

export const portAnswer = z.object({ number: z.int(), remainingMl: z.number(), bottle: bottle.nullable() });

export const rigAnswer = z.object({
  id: z.string(),
  name: z.string(),
  timeZone: z.string(),
  clock: z.enum(["real", "simulated"]),
  wasteCapacityMl: z.number().nullable(),
  wasteMl: z.number(),
  temperatureC: z.number().nullable(),
  lastContactAt: time.nullable(),
  reportedClock: time.nullable(),
  clockOffsetS: z.number().nullable(),
  agent: z
    .object({ name: z.string(), version: z.string(), state: z.enum(["idle", "working", "fault"]).nullable(), message: z.string().nullable() })
    .nullable(),
  abilities: z
    .object({
      minHz: z.number(),
      maxHz: z.number(),
      maxPoints: z.number(),
      maxDriveV: z.number(),
      minTemperatureC: z.number().optional(),
      maxTemperatureC: z.number().optional(),
      ports: z.number(),
      kinds: z.array(z.string()),
      repeatable: z.array(z.string()).optional(),
    })
    .nullable(),
  campaign: z
    .object({
      id: z.string(),
      number: z.int().nullable(),
      name: z.string(),
      state: z.enum(["running", "held", "finished", "stopped", "failed"]),
      sensorSerial: z.string(),
      cursorText: z.string().nullable(),
      takenOver: z.boolean(),
      /** Reasons of the open holds. */
      holds: z.array(z.enum(["person", "task", "limit", "failure", "silence", "takeOver", "setAside"])),
      /** When it will have ended, as planned when it was queued; late holds are not in it. */
      plannedEnd: time.nullable(),
    })
    .nullable(),
  queued: z.int(),
  ports: z.array(portAnswer),
  mounts: z.array(z.object({ id: z.string(), position: z.int(), sensorId: z.string(), serial: z.string(), since: time })),
  createdAt: time,
  retiredAt: time.nullable(),
});

export const rigPage = pageOf(rigAnswer);

export const heldAnswer = z.object({ holdId: z.string() });
export const wasteAnswer = z.object({ wasteMl: z.number() });

export const tokenAnswer = z.object({
  id: z.string(),
  name: z.string(),
  last4: z.string(),
  createdBy: z.string().nullable(),
  createdAt: time,
  lastUsedAt: time.nullable(),
  revokedAt: time.nullable(),
});
export const tokenPage = pageOf(tokenAnswer);

export const blockedTimeAnswer = z.object({ id: z.string(), from: time, to: time, why: z.string(), createdBy: z.string() });
export const blockedTimePage = pageOf(blockedTimeAnswer);

export const loadAnswer = z.object({
  id: z.string(),
  rigId: z.string(),
  port: z.int(),
  how: z.enum(["replace", "topUp"]),
  volumeMl: z.number(),
  lotId: z.string(),
  lotCode: z.string(),
  liquidId: z.string(),
  liquidName: z.string(),
  loadedBy: z.string().nullable(),
  loadedAt: time,
});
export const loadPage = pageOf(loadAnswer);

/** Contacts of a rig's agent, in ten-minute cells, oldest first. */
export const contactsAnswer = z.object({
  items: z.array(z.object({ rigId: z.string(), counts: z.array(z.int()), longestSilenceS: z.number().nullable() })),
  cellS: z.int(),
  to: time,
});

export type RigAnswer = z.output<typeof rigAnswer>;
export type PortAnswer = z.output<typeof portAnswer>;
export type TokenAnswer = z.output<typeof tokenAnswer>;
export type LoadAnswer = z.output<typeof loadAnswer>;
export type BlockedTimeAnswer = z.output<typeof blockedTimeAnswer>;
export type ContactsAnswer = z.output<typeof contactsAnswer>;
export type RigQuery = z.output<typeof rigQuery>;
