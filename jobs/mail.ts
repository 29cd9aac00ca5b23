import type { PgBoss } from "pg-boss";
import { send } from "@/jobs/queues";
import { deliver, findWaiting, giveUpOn } from "@/lib/notifications/deliver";

/** Puts every notification that waits in the queue; one that is there already stays one job. */
export async function queueMail(boss: PgBoss): Promise<void> {
  for (const notificationId of await findWaiting()) await send(boss, "mail", { notificationId }, { key: notificationId });
}

export const sendMail = ({ notificationId }: { notificationId: string }) => deliver({ notificationId, now: new Date() });

export const buryMail = ({ notificationId }: { notificationId: string }) => giveUpOn({ notificationId });
