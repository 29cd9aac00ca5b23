import { stabilityAnswer, stabilityQuery } from "@/lib/analysis/schema";
import { readStability } from "@/lib/analysis/stability";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Allan deviation and its kin with noise type, degrees of freedom and confidence band",
  params: idParams,
  query: stabilityQuery,
  answer: stabilityAnswer,
  handle: ({ params, query }) => readStability(params.id, query),
});
