import { eventPage } from "@/lib/campaigns/answers";
import { findEvents } from "@/lib/campaigns/events";
import { pageQuery } from "@/lib/http/paging";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "The log of a campaign, the newest first",
  params: idParams,
  query: pageQuery,
  answer: eventPage,
  handle: ({ params, query }) => findEvents({ campaignId: params.id, query }),
});
