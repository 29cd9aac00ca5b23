import { campaignAnswer } from "@/lib/campaigns/answers";
import { changeCampaign, deleteDraft } from "@/lib/campaigns/change-draft";
import { campaignChange, campaignCreated } from "@/lib/campaigns/draft-schema";
import { getCampaign } from "@/lib/campaigns/read";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "One campaign: state, holds, where it stands, progress and expected end",
  params: idParams,
  answer: campaignAnswer,
  handle: ({ params, now }) => getCampaign({ campaignId: params.id, now }),
});

export const PATCH = route({
  permission: "edit campaigns",
  summary: "Change a draft; of a queued campaign its name, priority and start",
  params: idParams,
  body: campaignChange,
  answer: campaignCreated,
  handle: ({ person, params, body, now }) => changeCampaign({ by: person, now, campaignId: params.id, ...body }),
});

export const DELETE = route({
  permission: "edit campaigns",
  summary: "Delete a draft that never started",
  params: idParams,
  handle: ({ person, params, now }) => deleteDraft({ by: person, now, campaignId: params.id }),
});
