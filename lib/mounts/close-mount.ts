import type { Transaction } from "sequelize";
import { openHold } from "@/lib/campaigns/open-hold";
import { change, rows } from "@/lib/db";
import { notify } from "@/lib/notify";
import type { Actor } from "@/lib/people/actor";
import { openTask } from "@/lib/tasks/open-task";

export type OpenMount = { id: string; sensorId: string; serial: string; rigId: string; rigName: string; from: Date };

type Closing = {
  mount: OpenMount;
  at: Date;
  by: Actor;
  now: Date;
  /** Name of the rig that the sensor was mounted on instead. */
  movedTo?: string;
  /** The sensor stays on its rig: it was only clamped anew, and its campaign need not wait for it. */
  keepsRig?: boolean;
};

/** Ends a mount. A campaign that uses it on that rig is held, with a task that asks for the sensor back. */
export async function closeMount(transaction: Transaction, { mount, at, by, now, movedTo, keepsRig = false }: Closing): Promise<void> {
  await change("update mount set period = tstzrange(lower(period), $2, '[)'), ended_by = $3 where id = $1", [mount.id, at, by.id], transaction);
  if (keepsRig) return;
  const using = await rows<{ id: string }>(
    "select id from campaign where rig_id = $1 and sensor_id = $2 and state in ('running', 'held') and not set_aside for no key update",
    [mount.rigId, mount.sensorId],
    transaction,
  );
  for (const campaign of using) {
    const text = movedTo ? `${mount.serial} was taken off ${mount.rigName} and mounted on ${movedTo}` : `${mount.serial} was taken off ${mount.rigName}`;
    const holdId = await openHold(transaction, { campaignId: campaign.id, reason: "task", text, by, now });
    await openTask(transaction, {
      rigId: mount.rigId,
      campaignId: campaign.id,
      holdId,
      kind: "mount",
      instruction: `Mount ${mount.serial} on ${mount.rigName} again; its campaign waits for it`,
      now,
    });
    await notify(`campaign:${campaign.id}`, transaction);
  }
}
