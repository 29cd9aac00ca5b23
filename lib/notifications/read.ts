import { z } from "zod";
import { rows } from "@/lib/db";
import { idSchema } from "@/lib/http/ids";
import { cutPage, readCursor, type Page } from "@/lib/http/paging";
import type { NotificationAnswer, NotificationQuery } from "@/lib/notifications/schema";
import { demand, type Actor } from "@/lib/people/actor";

type NotificationRow = Omit<NotificationAnswer, "createdAt" | "sentAt"> & { createdAt: Date; sentAt: Date | null };

/** Mail in a state, the newest first; never its content, which may hold a link that is a secret. */
export async function findNotifications({ by, query }: { by: Actor; query: NotificationQuery }): Promise<Page<NotificationAnswer>> {
  demand(by, "settings");
  const [before] = readCursor(query.cursor, z.tuple([idSchema])) ?? [null];
  const found = await rows<NotificationRow>(
    `select n.id, n.kind, n.state, p.name as person, n.address, n.subject, n.tries, n.error, n.alarm_id as "alarmId", n.created_at as "createdAt", n.sent_at as "sentAt"
       from notification n join person p on p.id = n.person_id
      where n.state = $1 and ($2::bigint is null or n.id < $2) order by n.id desc limit $3`,
    [query.state, before, query.limit + 1],
  );
  const { items, nextCursor } = cutPage(found, query.limit, ({ id }) => [id]);
  return { items: items.map(({ createdAt, sentAt, ...mail }) => ({ ...mail, createdAt: createdAt.toISOString(), sentAt: sentAt?.toISOString() ?? null })), nextCursor };
}
