import { find } from "@/lib/find/find";
import { findAnswer, findQuery } from "@/lib/find/schema";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Find campaigns, sensors, liquids, lots, rigs and protocols by words",
  query: findQuery,
  answer: findAnswer,
  handle: ({ person, query }) => find({ by: person, ...query }),
});
