import { audit } from "@/lib/audit/record";
import { change, inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";

/** Gives a dead letter a new series of tries. One that waits already stays as it is; one that was sent is not sent twice. */
export function sendAgain({ by, notificationId, now }: { by: Actor; notificationId: string; now: Date }): Promise<{ id: string }> {
  return inTransaction(async (transaction) => {
    demand(by, "settings");
    const mail = await row<{ state: string }>(`select state from notification where id = $1 for no key update`, [notificationId], transaction);
    if (!mail) throw notFound("mail");
    if (mail.state === "sent") throw conflict("This mail was sent");
    if (mail.state === "waiting") return { id: notificationId };
    await change(`update notification set state = 'waiting' where id = $1`, [notificationId], transaction);
    await audit(transaction, { by, now, action: "send again", entity: "notification", entityId: notificationId });
    await notify("mail", transaction);
    return { id: notificationId };
  });
}
