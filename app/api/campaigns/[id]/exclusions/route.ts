import { excludeReadings } from "@/lib/exclusions/exclude";
import { findExclusions } from "@/lib/exclusions/find";
import { excludeAnswer, excludeBody, exclusionItem } from "@/lib/exclusions/schema";
import { idParams } from "@/lib/http/ids";
import { pageOf, pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Repeats that people left out of a campaign, the newest first",
  params: idParams,
  query: pageQuery,
  answer: pageOf(exclusionItem),
  handle: ({ params, query }) => findExclusions({ campaignId: params.id, query }),
});

export const POST = route({
  permission: "exclude readings",
  summary: "Leave repeats out of their phase value",
  params: idParams,
  body: excludeBody,
  answer: excludeAnswer,
  status: 201,
  handle: ({ person, params, body, now }) => excludeReadings({ by: person, campaignId: params.id, ...body, now }),
});
