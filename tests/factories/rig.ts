import type { CreationAttributes } from "sequelize";
import { Port } from "@/models/port";
import { Rig } from "@/models/rig";
import { next, now } from "./now";

/** A rig with its ports, all empty, whose agent has said what it can do. */
export async function buildRig(given: Partial<CreationAttributes<Rig>> = {}): Promise<Rig> {
  const ports = given.ports ?? 4;
  const rig = await Rig.create({
    name: `Rig ${next()}`,
    timeZone: "Europe/Berlin",
    clock: "real",
    wasteCapacityMl: 5000,
    abilities: {
      minHz: 100,
      maxHz: 100_000,
      maxPoints: 4001,
      maxDriveV: 1,
      minTemperatureC: 5,
      maxTemperatureC: 60,
      ports,
      kinds: ["measure", "fill", "drain", "rinse", "dry", "settle"],
      repeatable: ["drain", "dry"],
    },
    createdAt: now,
    ...given,
    ports,
  });
  await Port.bulkCreate(Array.from({ length: ports }, (_, index) => ({ rigId: rig.id, number: index + 1 })));
  return rig;
}
