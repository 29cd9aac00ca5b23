import { campaignPage, campaignQuery } from "@/lib/campaigns/answers";
import { createCampaign } from "@/lib/campaigns/create";
import { campaignBody, campaignCreated } from "@/lib/campaigns/draft-schema";
import { findCampaigns } from "@/lib/campaigns/read";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Campaigns by state, rig, sensor, protocol and words",
  query: campaignQuery,
  answer: campaignPage,
  handle: ({ query, now }) => findCampaigns({ query, now }),
});

export const POST = route({
  permission: "edit campaigns",
  summary: "Make a draft of a campaign: a protocol version with a sensor on a rig, each slot with a port and a lot",
  body: campaignBody,
  answer: campaignCreated,
  status: 201,
  handle: ({ person, body, now }) => createCampaign({ by: person, now, ...body }),
});
