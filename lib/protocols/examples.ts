import type { DefinitionInput } from "@/lib/protocol/schema";

export type ProtocolExample = {
  id: string;
  /** What it is good for, in a sentence. */
  purpose: string;
  definition: DefinitionInput;
};

const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 101, dwell: { ringDowns: 5 }, driveV: 0.02 };
const quickSweep = { ...sweep, points: 61 };

const cleaning: DefinitionInput["blocks"] = [
  { kind: "drain" },
  { kind: "rinse", slot: "rinse", volumeMl: 20, times: 2 },
  { kind: "drain" },
  { kind: "dry", seconds: 1800, flowMlPerMin: 600 },
];
const park: DefinitionInput["blocks"] = [{ kind: "drain" }, { kind: "dry", seconds: 1800, flowMlPerMin: 600 }];

const backInAir: DefinitionInput["blocks"] = [
  {
    kind: "untilClean",
    blocks: cleaning,
    measure: { kind: "measure", medium: "air", role: "check", repeats: 10, sweep: quickSweep },
    tolerancePpm: 15,
    maxTimes: 3,
    otherwise: "hold",
  },
];

const limits: DefinitionInput["limits"] = [
  { kind: "return", tolerancePpm: 15, does: ["mail", "cleanAgain"], medium: "air" },
  { kind: "fit", sharePercent: 20, does: ["mail", "hold"] },
  { kind: "silence", afterS: 1800, does: ["mail"] },
];

/** Protocols to begin from. Their numbers suit a wire of some kHz in a cell of 40 mL; slots are bound to liquids when a campaign is queued. */
export const PROTOCOL_EXAMPLES: readonly ProtocolExample[] = [
  {
    id: "fill-and-return",
    purpose: "Air, one liquid, clean, back to air, ten times over: shows whether the air reference comes back.",
    definition: {
      name: "Fill and return",
      readout: "velocity",
      blocks: [
        { kind: "settle", temperatureC: 25, toleranceC: 0.05, holdS: 1200, timeoutS: 14_400 },
        { kind: "measure", medium: "air", role: "reference", repeats: 60, discard: 5, pauseS: 10, sweep },
        {
          kind: "repeat",
          times: 10,
          blocks: [
            { kind: "fill", slot: "sample", volumeMl: 40, flowMlPerMin: 20 },
            { kind: "settle", temperatureC: 25, toleranceC: 0.02, holdS: 900, timeoutS: 7200 },
            { kind: "measure", medium: "sample", repeats: 200, discard: 10, pauseS: 20, sweep },
            ...backInAir,
            { kind: "measure", medium: "air", role: "reference", repeats: 60, discard: 5, pauseS: 10, sweep },
          ],
        },
      ],
      limits,
      cleaning,
      park,
      parkAfterS: 43_200,
    },
  },
  {
    id: "daily-cycle",
    purpose: "One fill a day, begun at 06:00, so that a person can look before and after: for stability over weeks.",
    definition: {
      name: "Daily cycle",
      readout: "velocity",
      blocks: [
        { kind: "settle", temperatureC: 20, toleranceC: 0.05, holdS: 1800, timeoutS: 14_400 },
        {
          kind: "repeat",
          times: 28,
          blocks: [
            { kind: "wait", until: { time: "06:00" } },
            { kind: "measure", medium: "air", role: "reference", repeats: 100, discard: 5, pauseS: 10, sweep },
            { kind: "fill", slot: "sample", volumeMl: 40, flowMlPerMin: 10 },
            { kind: "wait", seconds: 1200 },
            { kind: "measure", medium: "sample", repeats: 300, discard: 20, pauseS: 60, sweep },
            ...cleaning,
            { kind: "measure", medium: "air", role: "check", repeats: 30, pauseS: 10, sweep: quickSweep },
          ],
        },
        { kind: "ask", instruction: "Look at the sensor under the microscope, and note what is on it.", urgency: "low" },
      ],
      limits: [...limits, { kind: "drift", quantity: "f0", crossesPpm: 50, withinDays: 30, does: ["mail"], medium: "air", minPhases: 5 }],
      cleaning,
      park,
      parkAfterS: 28_800,
    },
  },
  {
    id: "temperature-staircase",
    purpose: "Every temperature in air and in two liquids: gives the temperature coefficient and the points of a calibration.",
    definition: {
      name: "Temperature staircase",
      readout: "velocity",
      blocks: [
        {
          kind: "forEach",
          over: { temperaturesC: [15, 20, 25, 30, 35] },
          blocks: [
            { kind: "settle", temperatureC: "each", toleranceC: 0.05, holdS: 1800, timeoutS: 21_600 },
            { kind: "measure", medium: "air", role: "reference", repeats: 60, discard: 5, pauseS: 10, sweep },
            {
              kind: "forEach",
              over: { slots: ["liquid 1", "liquid 2"] },
              blocks: [
                { kind: "fill", slot: "each", volumeMl: 40, flowMlPerMin: 20 },
                { kind: "settle", temperatureC: "each", toleranceC: 0.02, holdS: 1200, timeoutS: 14_400 },
                { kind: "measure", medium: "each", repeats: 120, discard: 10, pauseS: 20, sweep },
                ...backInAir,
              ],
            },
          ],
        },
      ],
      limits: [...limits, { kind: "temperature", minC: 10, maxC: 40, does: ["mail", "hold"] }],
      cleaning,
      park,
    },
  },
];
