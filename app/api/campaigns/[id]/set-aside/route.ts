import { setCampaignAside } from "@/lib/campaigns/set-aside";
import { campaignAfter, setAsideBody } from "@/lib/campaigns/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "set campaigns aside",
  summary: "Park a campaign and free its rig without ending it",
  params: idParams,
  body: setAsideBody,
  answer: campaignAfter,
  handle: ({ person, params, body, now }) => setCampaignAside({ by: person, campaignId: params.id, why: body.why, now }),
});
