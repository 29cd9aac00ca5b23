import { row } from "@/lib/db";
import type { Actor } from "@/lib/people/actor";
import type { BlockInput } from "@/lib/protocol/block-schema";
import type { DefinitionInput } from "@/lib/protocol/schema";
import { createProtocol } from "@/lib/protocols/create";

/** Half a ring-down more than the five that a fit asks for: the width that the sweep follows scatters. */
const sweep = (points: number) => ({
  centre: "track" as const,
  span: { halfWidths: 8 },
  points,
  dwell: { ringDowns: 5.5 },
  driveV: 0.1,
});

const air = sweep(51);
const liquid = sweep(61);

const DAY_S = 86_400;

const common = { readout: "velocity" as const, parkAfterS: 4 * 3600 };

const fit = { id: "fit", kind: "fit" as const, sharePercent: 20, does: ["mail" as const, "hold" as const] };
const silence = { id: "silence", kind: "silence" as const, afterS: 1800, does: ["mail" as const] };
const count = { id: "failures", kind: "count" as const, failedSteps: 3, does: ["mail" as const, "hold" as const] };

const cleanWithPropanol: BlockInput[] = [
  { id: "rinse", kind: "rinse", slot: "2-Propanol", volumeMl: 25, times: 3 },
  { id: "dry", kind: "dry", seconds: 5400, flowMlPerMin: 600 },
];

/** The air reference comes at six in the morning, long after the drying: the cell is warm again by then. */
const twoLiquids: DefinitionInput = {
  ...common,
  name: "Wire, two liquids a day",
  baseline: { airReferences: 5 },
  blocks: [
    { id: "to-20", kind: "settle", temperatureC: 20, toleranceC: 0.02, holdS: 1800, timeoutS: 14_400 },
    {
      id: "days",
      kind: "repeat",
      times: 42,
      blocks: [
        { id: "air", kind: "measure", medium: "air", role: "reference", repeats: 60, discard: 2, pauseS: 20, sweep: air, label: "Air reference" },
        { id: "fill-water", kind: "fill", slot: "Water", volumeMl: 50, flowMlPerMin: 20 },
        { id: "water", kind: "measure", medium: "Water", repeats: 65, discard: 5, pauseS: 30, sweep: liquid },
        { id: "drain-water", kind: "drain" },
        { id: "fill-calder", kind: "fill", slot: "Calder 12", volumeMl: 45, flowMlPerMin: 15 },
        { id: "calder", kind: "measure", medium: "Calder 12", repeats: 60, discard: 5, pauseS: 30, sweep: liquid },
        { id: "drain-calder", kind: "drain" },
        {
          id: "clean",
          kind: "untilClean",
          blocks: cleanWithPropanol,
          measure: { id: "clean-check", kind: "measure", medium: "air", repeats: 16, discard: 10, sweep: air, label: "Is it clean?" },
          tolerancePpm: 16,
          maxTimes: 2,
          otherwise: "continue",
        },
        { id: "to-morning", kind: "wait", until: { time: "06:00" } },
      ],
    },
  ],
  limits: [
    { id: "return", kind: "return", tolerancePpm: 30, toleranceQPercent: 3, does: ["mail", "hold"], deadTimeS: 7.5 * DAY_S },
    { id: "drift", kind: "drift", quantity: "f0", ppmPerDay: 0.4, does: ["mail"] },
    { id: "temperature", kind: "temperature", minC: 19.9, maxC: 20.1, does: ["mail"] },
    fit,
    silence,
    count,
  ],
  park: [{ id: "park-drain", kind: "drain" }, ...prefixed("park-", cleanWithPropanol)],
  cleaning: prefixed("again-", cleanWithPropanol),
};

/** Drying cools the tube, which a thermometer in the bath does not show: half an hour at rest and ten repeats left out. */
const brine: DefinitionInput = {
  ...common,
  name: "Tube, brine against water",
  baseline: { airReferences: 3 },
  blocks: [
    {
      id: "cycles",
      kind: "repeat",
      times: 60,
      blocks: [
        { id: "rest", kind: "settle", temperatureC: 20, toleranceC: 0.02, holdS: 1800, timeoutS: 14_400 },
        { id: "air", kind: "measure", medium: "air", role: "reference", repeats: 40, discard: 10, sweep: air, label: "Air reference" },
        { id: "fill-water", kind: "fill", slot: "Water", volumeMl: 12, flowMlPerMin: 6 },
        { id: "water", kind: "measure", medium: "Water", repeats: 45, discard: 5, sweep: air },
        { id: "drain-water", kind: "drain" },
        { id: "fill-brine", kind: "fill", slot: "Brine B-35", volumeMl: 12, flowMlPerMin: 6 },
        { id: "brine", kind: "measure", medium: "Brine B-35", repeats: 45, discard: 5, sweep: air },
        { id: "drain-brine", kind: "drain" },
        { id: "rinse-water", kind: "rinse", slot: "Water", volumeMl: 10, times: 2 },
        { id: "rinse-propanol", kind: "rinse", slot: "2-Propanol", volumeMl: 10, times: 1 },
        { id: "dry", kind: "dry", seconds: 1200, flowMlPerMin: 200 },
      ],
    },
  ],
  limits: [
    { id: "return", kind: "return", tolerancePpm: 25, toleranceQPercent: 2, does: ["mail"], deadTimeS: 3 * DAY_S },
    { id: "drift", kind: "drift", quantity: "f0", ppmPerDay: 5, minPhases: 10, does: ["mail"] },
    { id: "temperature", kind: "temperature", minC: 19.9, maxC: 20.1, does: ["mail"] },
    fit,
    silence,
    count,
  ],
  park: [
    { id: "park-drain", kind: "drain" },
    { id: "park-rinse-water", kind: "rinse", slot: "Water", volumeMl: 10, times: 2 },
    { id: "park-rinse-propanol", kind: "rinse", slot: "2-Propanol", volumeMl: 10, times: 1 },
    { id: "park-dry", kind: "dry", seconds: 1200, flowMlPerMin: 200 },
  ],
};

const coldTurns = (part: number): BlockInput => ({
  id: `turns-${part}`,
  kind: "repeat",
  times: 6,
  blocks: [
    { id: `air-${part}`, kind: "measure", medium: "air", role: "reference", repeats: 40, discard: 4, sweep: air, label: "Air reference" },
    { id: `fill-${part}`, kind: "fill", slot: "Tarn mix 3", volumeMl: 30, flowMlPerMin: 10 },
    { id: `tarn-${part}`, kind: "measure", medium: "Tarn mix 3", repeats: 80, discard: 5, pauseS: 25, sweep: liquid },
    { id: `drain-${part}`, kind: "drain" },
    { id: `rinse-${part}`, kind: "rinse", slot: "2-Propanol", volumeMl: 20, times: 2 },
    { id: `dry-${part}`, kind: "dry", seconds: 3600, flowMlPerMin: 400 },
    { id: `rest-${part}`, kind: "wait", seconds: 3 * 3600 },
  ],
});

const askForDesiccant = (part: number): BlockInput => ({
  id: `desiccant-${part}`,
  kind: "ask",
  instruction: "Change the desiccant cartridge of the purge line and wipe the cell's window dry. The fork stays where it is.",
  urgency: "normal",
});

const cold: DefinitionInput = {
  ...common,
  name: "Fork at 5 °C",
  baseline: { airReferences: 3 },
  blocks: [
    { id: "to-5", kind: "settle", temperatureC: 5, toleranceC: 0.03, holdS: 3600, timeoutS: 28_800 },
    coldTurns(1),
    askForDesiccant(1),
    coldTurns(2),
    askForDesiccant(2),
    coldTurns(3),
  ],
  limits: [
    { id: "return", kind: "return", tolerancePpm: 40, toleranceQPercent: 4, does: ["mail", "hold"], deadTimeS: 3 * DAY_S },
    { id: "drift", kind: "drift", quantity: "f0", ppmPerDay: 4, minPhases: 8, does: ["mail"] },
    { id: "temperature", kind: "temperature", minC: 4.8, maxC: 5.2, does: ["mail"] },
    fit,
    silence,
    count,
  ],
  park: [
    { id: "park-drain", kind: "drain" },
    { id: "park-rinse", kind: "rinse", slot: "2-Propanol", volumeMl: 20, times: 2 },
    { id: "park-dry", kind: "dry", seconds: 3600, flowMlPerMin: 400 },
  ],
};

const staircase: DefinitionInput = {
  ...common,
  name: "Wire, temperature staircase in water",
  baseline: { airReferences: 2 },
  blocks: [
    {
      id: "turns",
      kind: "repeat",
      times: 3,
      blocks: [
        {
          id: "stairs",
          kind: "forEach",
          over: { temperaturesC: [15, 20, 25, 30] },
          blocks: [
            { id: "settle", kind: "settle", temperatureC: "each", toleranceC: 0.02, holdS: 2700, timeoutS: 21_600 },
            { id: "air", kind: "measure", medium: "air", role: "reference", repeats: 30, discard: 3, sweep: air, label: "Air reference" },
            { id: "fill", kind: "fill", slot: "Water", volumeMl: 50, flowMlPerMin: 20 },
            { id: "water", kind: "measure", medium: "Water", repeats: 60, discard: 10, pauseS: 20, sweep: liquid },
            { id: "drain", kind: "drain" },
            { id: "dry", kind: "dry", seconds: 5400, flowMlPerMin: 600 },
          ],
        },
      ],
    },
  ],
  limits: [
    { id: "return", kind: "return", tolerancePpm: 30, does: ["mail"] },
    fit,
    silence,
    count,
  ],
  park: [
    { id: "park-drain", kind: "drain" },
    { id: "park-dry", kind: "dry", seconds: 5400, flowMlPerMin: 600 },
  ],
};

/** Ids of protocol versions. */
export type Protocols = Record<keyof typeof definitions, string>;

export const definitions = { twoLiquids, brine, cold, staircase };

export async function seedProtocols({ by, now }: { by: Actor; now: Date }): Promise<Protocols> {
  const versions: Partial<Protocols> = {};
  for (const [key, definition] of Object.entries(definitions) as [keyof typeof definitions, DefinitionInput][]) {
    const found = await row<{ id: string }>(
      `select v.id from protocol_version v join protocol p on p.id = v.protocol_id where p.name = $1 and v.version = 1`,
      [definition.name],
    );
    versions[key] = found?.id ?? (await createProtocol({ by, now, definition })).versionId;
  }
  return versions as Protocols;
}

/** The same blocks once more under other ids. */
function prefixed(prefix: string, blocks: readonly BlockInput[]): BlockInput[] {
  return blocks.map((block) => ({ ...block, id: `${prefix}${block.id}` }));
}
