import { audit } from "@/lib/audit/record";
import { inTransaction, row } from "@/lib/db";
import { conflict, impossible, notFound } from "@/lib/errors";
import { closeMount, type OpenMount } from "@/lib/mounts/close-mount";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";

type Ending = { by: Actor; now: Date; mountId: string; endedAt?: Date; note?: string };

/** Records that a sensor was taken out of its rig; a campaign that uses it there waits until it is back. */
export async function endMount({ by, now, mountId, endedAt = now, note }: Ending): Promise<{ id: string }> {
  demand(by, "record mounts");
  if (endedAt > now) throw impossible("A mount cannot end in the future", { errors: [{ path: "endedAt", message: "lies in the future" }] });
  return inTransaction(async (transaction) => {
    const mount = await row<OpenMount & { open: boolean }>(
      `select m.id, m.sensor_id as "sensorId", s.serial, m.rig_id as "rigId", r.name as "rigName", lower(m.period) as "from", upper_inf(m.period) as open
         from mount m join sensor s on s.id = m.sensor_id join rig r on r.id = m.rig_id where m.id = $1 for no key update of m`,
      [mountId],
      transaction,
    );
    if (!mount) throw notFound("mount");
    if (!mount.open) throw conflict(`That mount of ${mount.serial} has already ended`, "mount-ended");
    if (endedAt <= mount.from) throw impossible("A mount cannot end before it began", { errors: [{ path: "endedAt", message: "is not after the beginning" }] });

    await closeMount(transaction, { mount, at: endedAt, by, now });
    await audit(transaction, { by, now, action: "end mount", entity: "sensor", entityId: mount.sensorId, detail: { mountId, rigId: mount.rigId, endedAt, note } });
    await notify("changed:rigs", transaction);
    return { id: mountId };
  });
}
