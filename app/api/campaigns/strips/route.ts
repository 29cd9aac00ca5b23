import { readStrips } from "@/lib/campaigns/strip";
import { stripsAnswer, stripsQuery } from "@/lib/campaigns/strip-schema";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "The runs of several campaigns as the strips of a list draw them",
  query: stripsQuery,
  answer: stripsAnswer,
  handle: ({ query, now }) => readStrips({ campaignIds: query.ids, now }),
});
