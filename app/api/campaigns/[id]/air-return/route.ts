import { readAirReturn } from "@/lib/analysis/air-return";
import { airReturnAnswer, airReturnQuery } from "@/lib/analysis/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Whether the air reference comes back: residue, ageing or a step, and cooling after drying",
  params: idParams,
  query: airReturnQuery,
  answer: airReturnAnswer,
  handle: ({ params, query }) => readAirReturn(params.id, query),
});
