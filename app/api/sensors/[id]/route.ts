import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getSensor } from "@/lib/sensors/read";
import { sensorAnswer, sensorChange } from "@/lib/sensors/schema";
import { updateSensor } from "@/lib/sensors/update";

export const GET = route({
  permission: "read",
  summary: "One sensor",
  params: idParams,
  answer: sensorAnswer,
  handle: ({ params }) => getSensor(params.id),
});

export const PATCH = route({
  permission: "edit sensors",
  summary: "Change what may still change of a sensor",
  params: idParams,
  body: sensorChange,
  answer: sensorAnswer,
  handle: ({ person, params, body, now }) => updateSensor({ by: person, now, sensorId: params.id, ...body }),
});
