import { audit } from "@/lib/audit/record";
import { setGiven } from "@/lib/changes";
import { inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { getSensor } from "@/lib/sensors/read";
import type { SensorAnswer } from "@/lib/sensors/schema";
import { Sensor } from "@/models/sensor";

type SensorChange = {
  by: Actor;
  now: Date;
  sensorId: string;
  readout?: "velocity" | "displacement";
  nominalF0Hz?: number;
  nominalQ?: number;
  radiusM?: number | null;
  note?: string | null;
  retired?: boolean;
};

/** Changes what may still change of a sensor. It is not retired while it is mounted or a campaign needs it. */
export async function updateSensor({ by, now, sensorId, retired, ...wanted }: SensorChange): Promise<SensorAnswer> {
  demand(by, "edit sensors");
  return inTransaction(async (transaction) => {
    const sensor = await Sensor.findByPk(sensorId, { transaction, lock: transaction.LOCK.UPDATE });
    if (!sensor) throw notFound("sensor");
    if (retired && !sensor.retiredAt) {
      const used = await row(
        `select 1 from campaign where sensor_id = $1 and state in ('queued', 'running', 'held')
         union all select 1 from mount where sensor_id = $1 and upper_inf(period) limit 1`,
        [sensorId],
        transaction,
      );
      if (used) throw conflict(`${sensor.serial} is mounted, or a campaign needs it; end that first`);
    }
    const retiredAt = retired === undefined ? undefined : retired ? (sensor.retiredAt ?? now) : null;
    const changes = setGiven(sensor, { ...wanted, retiredAt });
    if (changes) {
      await sensor.save({ transaction });
      await audit(transaction, { by, now, action: "update", entity: "sensor", entityId: sensorId, detail: changes });
      await notify("changed:sensors", transaction);
    }
    return getSensor(sensorId, transaction);
  });
}
