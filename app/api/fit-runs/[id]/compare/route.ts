import { compareFitRuns } from "@/lib/fit-runs/read";
import { compareQuery, comparison } from "@/lib/fit-runs/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "A fit run beside another, phase by phase",
  params: idParams,
  query: compareQuery,
  answer: comparison,
  handle: ({ params, query }) => compareFitRuns({ fitRunId: params.id, with: query.with }),
});
