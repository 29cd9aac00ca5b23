import { audit } from "@/lib/audit/record";
import { inTransaction } from "@/lib/db";
import { notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { fulfilTasks } from "@/lib/tasks/fulfil-tasks";
import { Rig } from "@/models/rig";

/** The waste container was emptied; tasks that asked for it are answered by that. */
export async function emptyWaste({ by, now, rigId }: { by: Actor; now: Date; rigId: string }): Promise<{ wasteMl: number }> {
  demand(by, "record loads");
  return inTransaction(async (transaction) => {
    const rig = await Rig.findByPk(rigId, { transaction, lock: transaction.LOCK.NO_KEY_UPDATE });
    if (!rig) throw notFound("rig");
    const heldMl = rig.wasteMl;
    await rig.update({ wasteMl: 0 }, { transaction });
    await audit(transaction, { by, now, action: "empty waste", entity: "rig", entityId: rigId, detail: { heldMl } });
    await fulfilTasks(transaction, { rigId, kind: "waste", note: "Waste emptied", by, now });
    await notify(`rig:${rigId}`, transaction);
    await notify("changed:rigs", transaction);
    return { wasteMl: 0 };
  });
}
