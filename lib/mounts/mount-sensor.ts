import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { constraintOf } from "@/lib/conflicts";
import { inTransaction, row, rows } from "@/lib/db";
import { conflict, impossible, notFound } from "@/lib/errors";
import { closeMount, type OpenMount } from "@/lib/mounts/close-mount";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { fulfilTasks } from "@/lib/tasks/fulfil-tasks";
import { Rig } from "@/models/rig";
import { Sensor } from "@/models/sensor";

type Mounting = { by: Actor; now: Date; sensorId: string; rigId: string; position?: number; mountedAt?: Date; note?: string };

/**
 * Records that a sensor was clamped in a rig. What it was clamped in before ends there; a campaign that used it on another rig
 * waits until it is back. A mount task for this sensor on this rig is answered by it, and the rig's campaign goes on with a new baseline.
 */
export async function mountSensor({ by, now, sensorId, rigId, position = 1, mountedAt = now, note }: Mounting): Promise<{ id: string }> {
  demand(by, "record mounts");
  if (mountedAt > now) throw impossible("A mount cannot lie in the future", { errors: [{ path: "mountedAt", message: "lies in the future" }] });
  return inTransaction(async (transaction) => {
    const { sensor, rig } = await lockBoth(sensorId, rigId, transaction);
    await refuseTaken({ rigId, rigName: rig.name, position, sensorId }, transaction);
    const before = await openMountOf(sensorId, transaction);
    if (before && before.from >= mountedAt)
      throw conflict(`${sensor.serial} was mounted on ${before.rigName} only after that time; give a later one`, "mount-order");

    if (before) await closeMount(transaction, { mount: before, at: mountedAt, by, now, movedTo: before.rigId === rigId ? undefined : rig.name, keepsRig: before.rigId === rigId });
    const id = await insertMount({ sensorId, rigId, position, mountedAt, by, now, note }, transaction);
    await audit(transaction, { by, now, action: "mount", entity: "sensor", entityId: sensorId, detail: { mountId: id, rigId, position, mountedAt, note, ended: before?.id } });
    await fulfilTasks(transaction, { rigId, kind: "mount", sensorId, note: `${sensor.serial} mounted on ${rig.name}, position ${position}`, by, now });

    const waiting = await rows<{ id: string }>(
      "update campaign set needs_advance = true where rig_id = $1 and sensor_id = $2 and state in ('running', 'held') returning id",
      [rigId, sensorId],
      transaction,
    );
    for (const campaign of waiting) await notify(`campaign:${campaign.id}`, transaction);
    await notify("changed:rigs", transaction);
    return { id };
  });
}

async function lockBoth(sensorId: string, rigId: string, transaction: Transaction): Promise<{ sensor: Sensor; rig: Rig }> {
  const sensor = await Sensor.findByPk(sensorId, { transaction, lock: transaction.LOCK.NO_KEY_UPDATE });
  if (!sensor) throw notFound("sensor");
  if (sensor.retiredAt) throw conflict(`${sensor.serial} is retired`);
  const rig = await Rig.findByPk(rigId, { transaction, lock: transaction.LOCK.NO_KEY_UPDATE });
  if (!rig) throw impossible("There is no such rig", { errors: [{ path: "rigId", message: "there is no such rig" }] });
  if (rig.retiredAt) throw conflict(`${rig.name} is retired`);
  return { sensor, rig };
}

type Place = { rigId: string; rigName: string; position: number; sensorId: string };

async function refuseTaken({ rigId, rigName, position, sensorId }: Place, transaction: Transaction): Promise<void> {
  const other = await row<{ serial: string }>(
    `select s.serial from mount m join sensor s on s.id = m.sensor_id
      where m.rig_id = $1 and m.position = $2 and m.sensor_id <> $3 and upper_inf(m.period)`,
    [rigId, position, sensorId],
    transaction,
  );
  if (other) throw conflict(`${other.serial} is mounted on ${rigName}, position ${position}; end that mount first`, "position-taken");
}

function openMountOf(sensorId: string, transaction: Transaction): Promise<OpenMount | undefined> {
  return row<OpenMount>(
    `select m.id, m.sensor_id as "sensorId", s.serial, m.rig_id as "rigId", r.name as "rigName", lower(m.period) as "from"
       from mount m join sensor s on s.id = m.sensor_id join rig r on r.id = m.rig_id
      where m.sensor_id = $1 and upper_inf(m.period) for no key update of m`,
    [sensorId],
    transaction,
  );
}

type MountRow = Required<Pick<Mounting, "sensorId" | "rigId" | "position" | "mountedAt" | "by" | "now">> & { note?: string };

async function insertMount({ sensorId, rigId, position, mountedAt, by, now, note }: MountRow, transaction: Transaction): Promise<string> {
  try {
    const made = await row<{ id: string }>(
      `insert into mount (sensor_id, rig_id, position, period, mounted_by, note, created_at)
       values ($1, $2, $3, tstzrange($4, null, '[)'), $5, $6, $7) returning id`,
      [sensorId, rigId, position, mountedAt, by.id, note ?? null, now],
      transaction,
    );
    if (made) return made.id;
    throw new Error("a mount was neither made nor refused");
  } catch (error) {
    if (constraintOf(error)?.startsWith("mount_"))
      throw conflict("At that time the sensor or the position was taken by another mount; look at the mounts and give a later time", "mount-overlap");
    throw error;
  }
}
