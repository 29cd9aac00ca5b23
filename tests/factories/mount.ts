import { row } from "@/lib/db";
import { Mount } from "@/models/mount";
import { now } from "./now";
import { buildRig } from "./rig";
import { buildSensor } from "./sensor";

type Given = { sensorId?: string; rigId?: string; position?: number; from?: Date; to?: Date; mountedBy?: string };

/** An open mount, unless `to` is given. */
export async function buildMount(given: Given = {}): Promise<Mount> {
  const sensorId = given.sensorId ?? (await buildSensor()).id;
  const rigId = given.rigId ?? (await buildRig()).id;
  const made = await row<{ id: string }>(
    `insert into mount (sensor_id, rig_id, position, period, mounted_by, created_at)
     values ($1, $2, $3, tstzrange($4, $5, '[)'), $6, $4) returning id`,
    [sensorId, rigId, given.position ?? 1, given.from ?? now, given.to ?? null, given.mountedBy ?? null],
  );
  if (!made) throw new Error("no mount was made");
  return Mount.findByPk(made.id, { rejectOnEmpty: true });
}
