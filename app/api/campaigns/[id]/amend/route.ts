import { amendCampaign } from "@/lib/campaigns/amend";
import { campaignAfter, amendBody } from "@/lib/campaigns/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "edit campaigns",
  summary: "Move a held campaign to another version of its protocol",
  params: idParams,
  body: amendBody,
  answer: campaignAfter,
  handle: ({ person, params, body, now }) => amendCampaign({ by: person, campaignId: params.id, protocolVersionId: body.protocolVersionId, why: body.why, now }),
});
