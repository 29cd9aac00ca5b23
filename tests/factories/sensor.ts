import type { CreationAttributes } from "sequelize";
import { Sensor } from "@/models/sensor";
import { next, now } from "./now";

export function buildSensor(given: Partial<CreationAttributes<Sensor>> = {}): Promise<Sensor> {
  return Sensor.create({ serial: `WR-${1000 + next()}`, kind: "wire", nominalF0Hz: 2400, nominalQ: 1800, radiusM: 5e-5, createdAt: now, ...given });
}
