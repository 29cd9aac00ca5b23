import { readDrift } from "@/lib/analysis/drift";
import { driftAnswer, driftQuery } from "@/lib/analysis/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Drift of phase values with its uncertainty",
  params: idParams,
  query: driftQuery,
  answer: driftAnswer,
  handle: ({ params, query }) => readDrift(params.id, query),
});
