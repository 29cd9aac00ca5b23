import { clearAlarm } from "@/lib/alarms/clear";
import { alarmAnswer, clearBody } from "@/lib/alarms/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "handle alarms",
  summary: "End an alarm with a note; no hold is released by it",
  params: idParams,
  body: clearBody,
  answer: alarmAnswer,
  handle: ({ person, params, body, now }) => clearAlarm({ by: person, now, alarmId: params.id, note: body.note }),
});
