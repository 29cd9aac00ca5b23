import { phasePage, phaseQuery } from "@/lib/campaigns/answers";
import { findPhases } from "@/lib/campaigns/phases";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Phases in order, each with its value",
  params: idParams,
  query: phaseQuery,
  answer: phasePage,
  handle: ({ params, query }) => findPhases({ campaignId: params.id, query }),
});
