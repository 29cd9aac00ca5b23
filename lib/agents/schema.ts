import { z } from "zod";
import { instant } from "@/lib/schema";

const opaque = z.string().min(1).max(64).regex(/^[A-Za-z0-9_-]+$/, "only letters, digits, - and _");
const text = (max: number) => z.string().min(1).max(max);
const finite = z.number();
const notNegative = z.number().min(0);

export const helloBody = z.object({
  agent: z.object({ name: text(100), version: text(50), instance: text(64).optional() }),
  clock: instant,
  replace: z.boolean().optional(),
  abilities: z
    .object({
      minHz: z.number().positive(),
      maxHz: z.number().positive(),
      maxPoints: z.int().min(11).max(4001),
      maxDriveV: z.number().positive(),
      minTemperatureC: finite.optional(),
      maxTemperatureC: finite.optional(),
      ports: z.int().min(0).max(99),
      kinds: z.array(text(30)).max(30),
      repeatable: z.array(text(30)).max(30).optional(),
    })
    .refine(({ minHz, maxHz }) => minHz < maxHz, { path: ["maxHz"], message: "maxHz must be above minHz" }),
});

export const helloAnswer = z.object({
  rig: z.object({ id: z.string(), name: z.string(), clock: z.enum(["real", "simulated"]) }),
  session: z.string(),
  contract: z.literal(1),
  serverTime: z.string(),
  leaseS: z.number(),
  heartbeatS: z.number(),
  waitS: z.number(),
  maxBodyBytes: z.number(),
  maxReadings: z.number(),
});

export const heartbeatBody = z.object({
  clock: instant,
  state: z.enum(["idle", "working", "fault"]),
  stepId: opaque.optional(),
  lease: opaque.optional(),
  done: z.object({ volumeMl: notNegative.optional(), times: z.int().min(0).optional(), seconds: notNegative.optional() }).optional(),
  temperatureC: finite.optional(),
  ports: z.array(z.object({ port: z.int().min(1).max(99), volumeMl: notNegative })).max(99).optional(),
  wasteMl: notNegative.optional(),
  message: z.string().max(2000).optional(),
});

export const wish = z.enum(["none", "hold", "stop"]);

export const heartbeatAnswer = z.object({
  serverTime: z.string(),
  wish,
  leaseExpiresAt: z.string().optional(),
  dueAt: z.string().optional(),
});

export const nextBody = z.object({ waitS: z.number().min(0).max(25).optional(), clock: instant.optional() });

const sweepParams = z.object({
  startHz: z.number(),
  stopHz: z.number(),
  points: z.int(),
  dwellS: z.number(),
  driveV: z.number(),
});

export const stepAnswer = z.object({
  id: z.string(),
  campaignId: z.string(),
  campaignNumber: z.int(),
  sequence: z.int(),
  kind: z.enum(["measure", "fill", "drain", "rinse", "dry", "settle"]),
  role: z.string().optional(),
  attempt: z.int(),
  lease: z.string(),
  leaseExpiresAt: z.string(),
  resumeFrom: z.int(),
  missing: z.array(z.tuple([z.int(), z.int()])).optional(),
  done: z.object({ volumeMl: z.number().optional(), times: z.number().optional(), seconds: z.number().optional() }).optional(),
  cycle: z.int(),
  label: z.string(),
  params: z.union([
    z.object({
      medium: z.string(),
      liquid: z.object({ slot: z.string(), port: z.int(), name: z.string() }).optional(),
      repeats: z.int(),
      pauseS: z.number(),
      sweep: sweepParams,
    }),
    z.object({ port: z.int(), volumeMl: z.number(), flowMlPerMin: z.number().optional(), times: z.int().optional() }),
    z.object({ seconds: z.number(), flowMlPerMin: z.number().optional() }),
    z.object({ temperatureC: z.number(), toleranceC: z.number(), holdS: z.number(), timeoutS: z.number() }),
    z.object({}),
  ]),
});

export const finishBody = z.discriminatedUnion("outcome", [
  z.object({ lease: opaque, outcome: z.literal("done") }),
  z.object({ lease: opaque, outcome: z.literal("interrupted") }),
  z.object({
    lease: opaque,
    outcome: z.literal("failed"),
    failure: z.object({
      code: z.enum(["port-empty", "waste-full", "pump", "thermostat", "instrument", "sensor", "timeout", "other"]),
      message: z.string().max(2000),
      retry: z.boolean(),
    }),
  }),
]);

export const finishAnswer = z.object({ step: z.enum(["done", "ready", "failed"]), next: z.enum(["ask", "wait"]) });

const values = z.array(z.number()).min(11).max(4001);
const complex = { re: values, im: values };
const grid = { startHz: z.number().positive(), stopHz: z.number().positive() };
const aboutReading = {
  index: z.int().min(0),
  takenAt: z.iso.datetime({ offset: true }),
  durationS: notNegative.optional(),
  temperatureC: finite.optional(),
  pressurePa: notNegative.optional(),
  humidityPercent: z.number().min(0).max(100).optional(),
};

/** The upload as the API reference shows it; `parseReadings` checks it by hand with the same verdicts. */
export const readingsContract = z.object({
  lease: opaque,
  readings: z
    .array(
      z.union([
        z.object({ ...aboutReading, sweep: z.object({ ...grid, ...complex }) }),
        z.object({ ...aboutReading, sweep: z.object({ ...grid, magnitude: values }) }),
        z.object({ ...aboutReading, frequencyHz: values, ...complex }),
        z.object({ ...aboutReading, frequencyHz: values, magnitude: values }),
        z.object({
          ...aboutReading,
          ringDown: z.object({ sampleHz: z.number().positive(), startS: finite, volts: z.array(z.number()).min(16).max(65_536) }),
        }),
        z.object({
          ...aboutReading,
          fitted: z.object({
            f0Hz: z.number().positive(),
            q: z.number().positive(),
            f0StdHz: notNegative.optional(),
            qStd: notNegative.optional(),
            amplitudeV: finite.optional(),
          }),
        }),
      ]),
    )
    .min(1)
    .max(500),
});

export const readingsAnswer = z.object({
  stored: z.array(z.int()),
  alreadyStored: z.array(z.int()),
  differs: z.array(z.int()),
  lease: z.enum(["current", "superseded"]),
  wish,
  leaseExpiresAt: z.string().optional(),
});

export type HelloBody = z.output<typeof helloBody>;
export type HeartbeatBody = z.output<typeof heartbeatBody>;
export type NextBody = z.output<typeof nextBody>;
export type FinishBody = z.output<typeof finishBody>;
export type StepAnswer = z.output<typeof stepAnswer>;
export type Wish = z.output<typeof wish>;
