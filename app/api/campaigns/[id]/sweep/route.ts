import { readSweep } from "@/lib/readings/read-sweep";
import { sweepAnswer, sweepQuery } from "@/lib/readings/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "One sweep with its fitted curve; the newest unless named",
  params: idParams,
  query: sweepQuery,
  answer: sweepAnswer,
  handle: ({ params, query }) => readSweep({ campaignId: params.id, ...query }),
});
