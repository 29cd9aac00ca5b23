import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { heldAnswer, takeOverBody } from "@/lib/rigs/schema";
import { takeOverRig } from "@/lib/rigs/take-over";

export const POST = route({
  permission: "take over rigs",
  summary: "Take over a rig: its campaign is held while a person works by hand",
  params: idParams,
  body: takeOverBody,
  answer: heldAnswer,
  handle: ({ person, params, body, now }) => takeOverRig({ by: person, now, rigId: params.id, why: body.why }),
});
