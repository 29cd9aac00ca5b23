import type { CreationAttributes } from "sequelize";
import { Load } from "@/models/load";
import { Port } from "@/models/port";
import { buildLot } from "./lot";
import { now } from "./now";
import { buildRig } from "./rig";

/** A bottle standing on a port, full as loaded. */
export async function buildLoad(given: Partial<CreationAttributes<Load>> = {}): Promise<Load> {
  const rigId = given.rigId ?? (await buildRig()).id;
  const lotId = given.lotId ?? (await buildLot()).id;
  const load = await Load.create({ port: 1, volumeMl: 1000, how: "replace", loadedAt: now, ...given, rigId, lotId });
  await Port.upsert({ rigId, number: load.port, loadId: load.id, remainingMl: load.volumeMl });
  return load;
}
