import { acknowledgeAlarm } from "@/lib/alarms/acknowledge";
import { alarmAnswer } from "@/lib/alarms/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "handle alarms",
  summary: "Take an alarm on: “I have this”",
  params: idParams,
  answer: alarmAnswer,
  handle: ({ person, params, now }) => acknowledgeAlarm({ by: person, now, alarmId: params.id }),
});
