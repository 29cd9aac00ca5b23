import { getAlarm } from "@/lib/alarms/read";
import { alarmDetail } from "@/lib/alarms/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "One alarm with the values that led to it",
  params: idParams,
  answer: alarmDetail,
  handle: ({ params, now }) => getAlarm({ alarmId: params.id, now }),
});
