import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getRig } from "@/lib/rigs/read";
import { rigAnswer, rigChange } from "@/lib/rigs/schema";
import { updateRig } from "@/lib/rigs/update";

export const GET = route({
  permission: "read",
  summary: "One rig",
  params: idParams,
  answer: rigAnswer,
  handle: ({ params }) => getRig(params.id),
});

export const PATCH = route({
  permission: "edit rigs",
  summary: "Change what may still change of a rig",
  params: idParams,
  body: rigChange,
  answer: rigAnswer,
  handle: ({ person, params, body, now }) => updateRig({ by: person, now, rigId: params.id, ...body }),
});
