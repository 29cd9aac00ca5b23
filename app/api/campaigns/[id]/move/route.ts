import { moveBody, movedAnswer } from "@/lib/campaigns/draft-schema";
import { moveInQueue } from "@/lib/campaigns/move-in-queue";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "edit campaigns",
  summary: "Give a queued campaign another place in its rig's line; its priority, and where needed that of others, follows",
  params: idParams,
  body: moveBody,
  answer: movedAnswer,
  handle: ({ person, params, body, now }) => moveInQueue({ by: person, now, campaignId: params.id, before: body.before }),
});
