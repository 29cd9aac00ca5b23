import { stopCampaign } from "@/lib/campaigns/stop";
import { campaignAfter, stopBody } from "@/lib/campaigns/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "stop campaigns",
  summary: "End a campaign for good; the cell is parked first",
  params: idParams,
  body: stopBody,
  answer: campaignAfter,
  handle: ({ person, params, body, now }) => stopCampaign({ by: person, campaignId: params.id, why: body.why, now }),
});
