import type { CreationAttributes } from "sequelize";
import type { Definition } from "@/lib/protocol/schema";
import { ProtocolVersion } from "@/models/protocol-version";
import { Protocol } from "@/models/protocol";
import { next, now } from "./now";

/** Three turns of air, one liquid, clean and dry; its only slot is called `sample`. */
export function aDefinition(given: Partial<Definition> = {}): Definition {
  const sweep = { centre: "track" as const, span: { halfWidths: 8 }, points: 61, dwell: { ringDowns: 5 }, driveV: 0.1 };
  return {
    name: "Three fills",
    readout: "velocity",
    baseline: { airReferences: 3 },
    maxAttempts: 3,
    limits: [],
    blocks: [
      {
        id: "cycles",
        kind: "repeat",
        times: 3,
        blocks: [
          { id: "air", kind: "measure", medium: "air", role: "reference", repeats: 10, discard: 0, pauseS: 0, sweep },
          { id: "fill", kind: "fill", slot: "sample", volumeMl: 40, flowMlPerMin: 20 },
          { id: "liquid", kind: "measure", medium: "sample", role: "sample", repeats: 20, discard: 0, pauseS: 0, sweep },
          { id: "drain", kind: "drain" },
          { id: "dry", kind: "dry", seconds: 600, flowMlPerMin: 500 },
        ],
      },
    ],
    ...given,
  };
}

export async function buildProtocol(given: Partial<CreationAttributes<Protocol>> = {}): Promise<Protocol> {
  return Protocol.create({ name: `Protocol ${next()}`, createdAt: now, ...given });
}

export async function buildProtocolVersion(given: Partial<CreationAttributes<ProtocolVersion>> = {}): Promise<ProtocolVersion> {
  const protocolId = given.protocolId ?? (await buildProtocol()).id;
  return ProtocolVersion.create({ version: 1, definition: aDefinition(), createdAt: now, ...given, protocolId });
}
