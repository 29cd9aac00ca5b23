import { route } from "@/lib/http/route";
import { findNotifications } from "@/lib/notifications/read";
import { notificationPage, notificationQuery } from "@/lib/notifications/schema";

export const GET = route({
  permission: "settings",
  summary: "Mail that could not be delivered, waits or was sent; its content is left out",
  query: notificationQuery,
  answer: notificationPage,
  handle: ({ person, query }) => findNotifications({ by: person, query }),
});
