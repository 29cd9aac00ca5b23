import { queueBody } from "@/lib/campaigns/draft-schema";
import { queueCampaign } from "@/lib/campaigns/queue";
import { campaignAfter } from "@/lib/campaigns/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "edit campaigns",
  summary: "Put a draft in line on its rig",
  description: "Cautions are answered with 422 and `cautions` until all of their codes are acknowledged in one call by the person who makes it.",
  params: idParams,
  body: queueBody,
  answer: campaignAfter,
  handle: ({ person, params, body, now }) => queueCampaign({ by: person, now, campaignId: params.id, acknowledgements: body.acknowledgements }),
});
