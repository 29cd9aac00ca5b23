import { takeBackExclusion } from "@/lib/exclusions/exclude";
import { takeBackAnswer, takeBackBody } from "@/lib/exclusions/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "exclude readings",
  summary: "Take a repeat that was left out back in",
  params: idParams,
  body: takeBackBody,
  answer: takeBackAnswer,
  handle: ({ person, params, body, now }) => takeBackExclusion({ by: person, exclusionId: params.id, why: body.why, now }),
});
