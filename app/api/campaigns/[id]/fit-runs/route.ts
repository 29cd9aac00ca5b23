import { findFitRuns } from "@/lib/fit-runs/read";
import { fitRunList, refitBody } from "@/lib/fit-runs/schema";
import { startRefit } from "@/lib/fit-runs/start-refit";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { created } from "@/lib/schema";

export const GET = route({
  permission: "read",
  summary: "Fit runs of a campaign, the newest first",
  params: idParams,
  answer: fitRunList,
  handle: ({ params }) => findFitRuns({ campaignId: params.id }),
});

export const POST = route({
  permission: "fit again",
  summary: "Fit a campaign again with other settings, beside what there is",
  params: idParams,
  body: refitBody,
  answer: created,
  status: 202,
  handle: ({ person, params, body, now }) => startRefit({ by: person, campaignId: params.id, body, now }),
});
