import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { heldAnswer, giveBackBody } from "@/lib/rigs/schema";
import { giveBackRig } from "@/lib/rigs/take-over";

export const POST = route({
  permission: "take over rigs",
  summary: "Give a rig back after a take-over",
  params: idParams,
  body: giveBackBody,
  answer: heldAnswer,
  handle: ({ person, params, body, now }) => giveBackRig({ by: person, now, rigId: params.id, note: body.note }),
});
