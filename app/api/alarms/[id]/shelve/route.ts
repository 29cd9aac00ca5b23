import { alarmAnswer, shelveBody } from "@/lib/alarms/schema";
import { shelveAlarm } from "@/lib/alarms/shelve";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "handle alarms",
  summary: "Lay an alarm aside until a time, or bring it back",
  params: idParams,
  body: shelveBody,
  answer: alarmAnswer,
  handle: ({ person, params, body, now }) => shelveAlarm({ by: person, now, alarmId: params.id, until: body.until, note: body.note }),
});
