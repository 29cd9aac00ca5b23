import { readOverview } from "@/lib/campaigns/overview";
import { overviewAnswer, overviewQuery } from "@/lib/campaigns/overview-schema";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "How many campaigns do what, how many a filter shows and would show with one word less, and the words to filter by",
  query: overviewQuery,
  answer: overviewAnswer,
  handle: ({ query }) => readOverview(query),
});
