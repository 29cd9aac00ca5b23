import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { mountSensor } from "@/lib/mounts/mount-sensor";
import { findMounts } from "@/lib/mounts/read";
import { mountBody, mountPage, mountQuery } from "@/lib/mounts/schema";
import { created } from "@/lib/schema";

export const GET = route({
  permission: "read",
  summary: "Mounts of a sensor, newest first",
  params: idParams,
  query: mountQuery,
  answer: mountPage,
  handle: ({ params, query }) => findMounts({ sensorId: params.id, ...query }),
});

export const POST = route({
  permission: "record mounts",
  summary: "Record that a sensor was clamped in a rig; where it was before ends",
  params: idParams,
  body: mountBody,
  answer: created,
  status: 201,
  handle: ({ person, params, body, now }) => mountSensor({ by: person, now, sensorId: params.id, ...body }),
});
