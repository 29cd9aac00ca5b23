import { checkCampaign } from "@/lib/campaigns/check";
import { campaignBody, checkAnswer } from "@/lib/campaigns/draft-schema";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "edit campaigns",
  summary: "What a campaign would take, what stands against it, and its cautions; nothing is stored",
  body: campaignBody,
  answer: checkAnswer,
  handle: ({ person, body, now }) => checkCampaign({ by: person, now, ...body }),
});
