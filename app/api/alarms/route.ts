import { findAlarms } from "@/lib/alarms/read";
import { alarmPage, alarmQuery } from "@/lib/alarms/schema";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Alarms, the newest first",
  query: alarmQuery,
  answer: alarmPage,
  handle: ({ query, now }) => findAlarms({ query, now }),
});
