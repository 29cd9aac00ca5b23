import { audit } from "@/lib/audit/record";
import { refuseDouble } from "@/lib/conflicts";
import { inTransaction } from "@/lib/db";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { Port } from "@/models/port";
import { Rig } from "@/models/rig";

type NewRig = {
  by: Actor;
  now: Date;
  name: string;
  timeZone: string;
  ports: number;
  clock?: "real" | "simulated";
  wasteCapacityMl?: number;
};

/** Makes a rig with its ports, all empty. */
export async function createRig({ by, now, ports, clock = "real", ...given }: NewRig): Promise<{ id: string }> {
  demand(by, "edit rigs");
  return inTransaction(async (transaction) => {
    const rig = await refuseDouble({ constraint: "rig_name_key", field: "name", message: `There is already a rig called ${given.name}; choose another name` }, () =>
      Rig.create({ ...given, ports, clock, createdAt: now }, { transaction }),
    );
    await Port.bulkCreate(
      Array.from({ length: ports }, (_, index) => ({ rigId: rig.id, number: index + 1 })),
      { transaction },
    );
    await audit(transaction, { by, now, action: "create", entity: "rig", entityId: rig.id, detail: { ...given, ports, clock } });
    await notify("changed:rigs", transaction);
    return { id: rig.id };
  });
}
