import { holdCampaign } from "@/lib/campaigns/hold";
import { campaignAfter, holdBody } from "@/lib/campaigns/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "hold campaigns",
  summary: "Hold a campaign after the present repeat; holding a held one changes nothing",
  params: idParams,
  body: holdBody,
  answer: campaignAfter,
  handle: ({ person, params, body, now }) => holdCampaign({ by: person, campaignId: params.id, why: body.why, now }),
});
