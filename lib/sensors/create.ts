import { audit } from "@/lib/audit/record";
import { refuseDouble } from "@/lib/conflicts";
import { inTransaction } from "@/lib/db";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { Sensor } from "@/models/sensor";

type NewSensor = {
  by: Actor;
  now: Date;
  serial: string;
  kind: "wire" | "tube" | "fork" | "plate";
  readout?: "velocity" | "displacement";
  nominalF0Hz: number;
  nominalQ: number;
  radiusM?: number;
  note?: string;
};

export async function createSensor({ by, now, ...given }: NewSensor): Promise<{ id: string }> {
  demand(by, "edit sensors");
  return inTransaction(async (transaction) => {
    const { id } = await refuseDouble({ constraint: "sensor_serial_key", field: "serial", message: `There is already a sensor ${given.serial}` }, () =>
      Sensor.create({ ...given, createdAt: now }, { transaction }),
    );
    await audit(transaction, { by, now, action: "create", entity: "sensor", entityId: id, detail: { ...given } });
    await notify("changed:sensors", transaction);
    return { id };
  });
}
