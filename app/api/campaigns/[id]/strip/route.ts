import { readStrip } from "@/lib/campaigns/strip";
import { stripAnswer } from "@/lib/campaigns/strip-schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "The run of a campaign as the strip draws it",
  params: idParams,
  answer: stripAnswer,
  handle: ({ params, now }) => readStrip({ campaignId: params.id, now }),
});
