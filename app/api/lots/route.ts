import { route } from "@/lib/http/route";
import { findLots } from "@/lib/liquids/lots";
import { lotPage, lotQuery } from "@/lib/liquids/schema";

export const GET = route({
  permission: "read",
  summary: "Lots of all liquids, newest first, with where their bottles stand",
  query: lotQuery,
  answer: lotPage,
  handle: ({ query }) => findLots(query),
});
