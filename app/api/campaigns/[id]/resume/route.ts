import { resumeCampaign } from "@/lib/campaigns/resume";
import { campaignAfter, resumeBody } from "@/lib/campaigns/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "resume campaigns",
  summary: "Let a held campaign go on here, from the phase or from the cycle",
  params: idParams,
  body: resumeBody,
  answer: campaignAfter,
  handle: ({ person, params, body, now }) => resumeCampaign({ by: person, campaignId: params.id, from: body.from, now }),
});
