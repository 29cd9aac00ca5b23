import { z } from "zod";

const positive = z.number().positive();
const complex = z.tuple([z.number(), z.number()]);

const tablePoint = z.object({ temperatureC: z.number(), densityKgM3: positive, viscosityMPaS: positive });

export const liquidModel = z.discriminatedUnion("model", [
  z.object({ model: z.enum(["water", "ethanol", "2-propanol"]) }),
  z.object({
    model: z.enum(["ethanol-water", "2-propanol-water", "glycerol-water"]),
    massFraction: z.number().min(0).max(1),
  }),
  z.object({ model: z.literal("table"), table: z.array(tablePoint).min(1) }),
]);

const rig = z.strictObject({
  name: z.string(),
  abilities: z.strictObject({
    minHz: positive,
    maxHz: positive,
    maxPoints: z.int().min(11).default(4001),
    maxDriveV: positive.default(1),
    minTemperatureC: z.number().optional(),
    maxTemperatureC: z.number().optional(),
  }),
  /** Kinds of step that may be done again after a loss of memory: fill and rinse where the rig measures what is in the cell. */
  repeatable: z.array(z.enum(["fill", "rinse", "drain", "dry"])).default(["drain", "dry"]),
  ports: z.array(z.strictObject({ port: z.int().min(1), name: z.string(), liquid: liquidModel, volumeMl: positive })),
  /** Whether heartbeats tell what is in the bottles. Without, the laboratory's book of loads stands. */
  levelSensors: z.boolean().default(false),
  wasteCapacityMl: positive.default(5000),
  flowMlPerMin: positive.default(20),
  drainS: positive.default(60),
});

const body = z.discriminatedUnion("shape", [
  z.strictObject({
    shape: z.literal("rod"),
    radiusM: positive,
    /** Density of a solid rod; lower where the body pushes more fluid than its own volume. */
    bodyDensityKgM3: positive,
    vacuumHz: positive,
    intrinsicQ: positive,
  }),
  z.strictObject({
    shape: z.literal("tube"),
    lengthM: positive,
    innerRadiusM: positive,
    outerRadiusM: positive,
    modulusPa: positive,
    wallDensityKgM3: positive,
    intrinsicQ: positive,
  }),
]);

const sensor = z.strictObject({
  serial: z.string(),
  kind: z.enum(["wire", "tube", "fork", "plate"]),
  readout: z.enum(["velocity", "displacement"]).default("velocity"),
  body,
  /** f0 · (1 + ppmPerK ΔT + ppmPerK2 ΔT²), ΔT from referenceC. */
  thermal: z
    .strictObject({ referenceC: z.number().default(20), ppmPerK: z.number().default(-20), ppmPerK2: z.number().default(0.05) })
    .prefault({}),
});

/** Volts per volt of drive, the peak in air at 20 °C; noise in volts, per quadrature and point. */
const signal = z.strictObject({
  peakVPerV: positive.default(1),
  phaseRad: z.number().default(0.4),
  offsetVPerV: complex.default([0.004, -0.002]),
  slopeVPerV: complex.default([0.0006, 0.0004]),
  noiseV: z.number().min(0).default(2e-6),
});

/** In which form readings are sent, and which way and how evenly sweeps go. An uneven one is denser in the middle. */
const sends = z.strictObject({
  form: z.enum(["complex", "magnitude", "ringDown", "fitted"]).default("complex"),
  grid: z.enum(["even", "downward", "uneven"]).default("even"),
});

const surroundings = z.strictObject({
  setPointC: z.number().default(20),
  ambientC: z.number().default(21.5),
  ambientSwingC: z.number().default(1.2),
  /** Hour of the day at which the campaign's clock starts. */
  startHour: z.number().min(0).max(24).default(8),
  /** Share of ambient minus set-point that reaches the bath. */
  leak: z.number().min(0).max(1).default(0.002),
  bathTimeConstantS: positive.default(420),
  /** The sensor sees the leak this much later than the thermometer. */
  sensorLagS: z.number().min(0).default(900),
  wanderC: z.number().min(0).default(0.0008),
  thermometerNoiseC: z.number().min(0).default(0.0005),
  /** Evaporation cools the sensor by this much at the end of drying; it returns with this time constant. */
  dryingCoolsC: z.number().min(0).default(0.25),
  coolingTimeConstantS: positive.default(500),
  pressurePa: z.number().default(101_100),
  pressureSwingPa: z.number().min(0).default(900),
  humidityPercent: z.number().min(0).max(100).default(45),
  humiditySwingPercent: z.number().min(0).default(8),
});

/** Of the resonance itself, besides what the sweep's voltage noise makes. */
const noise = z.strictObject({
  f0WhitePpm: z.number().min(0).default(0.05),
  f0FlickerPpm: z.number().min(0).default(0.02),
  f0WalkPpmPerRootDay: z.number().min(0).default(0.03),
  qWhitePercent: z.number().min(0).default(0.02),
  qFlickerPercent: z.number().min(0).default(0.01),
  /** What is left of the last liquid makes each filling a little different. */
  fillScatterKgM3: z.number().min(0).default(0.02),
});

const fromWhen = { fromCycle: z.int().min(0).optional(), fromHours: z.number().min(0).optional() };

const changes = z.strictObject({
  drift: z
    .array(z.strictObject({ fromHours: z.number().min(0).default(0), f0PpmPerDay: z.number().default(0), qPercentPerDay: z.number().default(0) }))
    .default([]),
  /** Grows by this much with each cycle from a cycle on. */
  creep: z
    .array(z.strictObject({ fromCycle: z.int().min(0), f0PpmPerCycle: z.number().default(0), qPercentPerCycle: z.number().default(0) }))
    .default([]),
  /** b · ln(1 + t/τ). */
  ageing: z.strictObject({ f0Ppm: z.number(), qPercent: z.number().default(0), timeConstantHours: positive }).optional(),
  /** What imperfect cleaning leaves from a cycle on; rinses beyond the usual number take part of it away for that cycle. */
  residue: z
    .strictObject({
      fromCycle: z.int().min(0),
      f0PpmPerCycle: z.number(),
      qPercentPerCycle: z.number(),
      usualRinses: z.int().min(0).default(3),
      keptPerExtraRinse: z.number().min(0).max(1).default(0.6),
    })
    .optional(),
  slips: z.array(z.strictObject({ ...fromWhen, f0Ppm: z.number(), qPercent: z.number().default(0) })).default([]),
  /** A bubble on the sensor in the first repeats after the cycle's filling. */
  bubbles: z.array(z.strictObject({ cycle: z.int().min(0), repeats: z.int().min(1), share: z.number().min(0).max(1) })).default([]),
});

const atStep = { cycle: z.int().min(0).optional(), sequence: z.int().min(1).optional() };

const faults = z.strictObject({
  /** The agent drops its memory in the middle of a step: before this repeat, or half-way through another kind of step. */
  crashes: z.array(z.strictObject({ ...atStep, kind: z.string().default("measure"), index: z.int().min(0).default(0) })).default([]),
  pump: z
    .array(z.strictObject({ ...atStep, kind: z.enum(["fill", "rinse", "drain", "dry"]).default("fill"), times: z.int().min(1).default(1), retry: z.boolean().default(false) }))
    .default([]),
  /** The bath does not come to temperature. */
  thermostat: z.array(z.strictObject({ ...atStep, times: z.int().min(1).default(1), retry: z.boolean().default(true) })).default([]),
  /** Chances per request. */
  network: z
    .strictObject({
      dropRequest: z.number().min(0).max(1).default(0),
      dropAnswer: z.number().min(0).max(1).default(0),
      duplicate: z.number().min(0).max(1).default(0),
      /** Arrives once more, after a later request. */
      reorder: z.number().min(0).max(1).default(0),
      delay: z.number().min(0).max(1).default(0),
      delayMs: z.number().min(0).default(200),
    })
    .optional(),
  /** Hours of the rig's clock, counted from its start, without network; readings wait in the spool. */
  offline: z.array(z.strictObject({ fromHours: z.number().min(0), hours: positive })).default([]),
  clockOffsetS: z.number().default(0),
});

export const scenarioSchema = z.strictObject({
  name: z.string().regex(/^[a-z0-9-]+$/),
  description: z.string(),
  rig,
  sensor,
  signal: signal.prefault({}),
  sends: sends.prefault({}),
  surroundings: surroundings.prefault({}),
  noise: noise.prefault({}),
  /** Nominal hours from one step to the next: what time means for drift, ageing, weather and noise. See `elapsedS`. */
  pace: z.strictObject({ hoursPerStep: positive }).prefault({ hoursPerStep: 1 }),
  changes: changes.prefault({}),
  faults: faults.prefault({}),
});

export type Scenario = z.output<typeof scenarioSchema>;
