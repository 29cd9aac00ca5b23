import { createCampaign } from "@/lib/campaigns/create";
import { campaignBody, campaignCreated } from "@/lib/campaigns/draft-schema";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "edit campaigns",
  summary: "Make a draft of a campaign: a protocol version with a sensor on a rig, each slot with a port and a lot",
  body: campaignBody,
  answer: campaignCreated,
  status: 201,
  handle: ({ person, body, now }) => createCampaign({ by: person, now, ...body }),
});
