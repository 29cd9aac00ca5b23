import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { endMount } from "@/lib/mounts/end-mount";
import { endMountBody } from "@/lib/mounts/schema";
import { created } from "@/lib/schema";

export const POST = route({
  permission: "record mounts",
  summary: "Record that a sensor was taken out of its rig",
  params: idParams,
  body: endMountBody,
  answer: created,
  handle: ({ person, params, body, now }) => endMount({ by: person, now, mountId: params.id, ...body }),
});
