import { idParams } from "@/lib/http/ids";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { usedInPage } from "@/lib/liquids/schema";
import { findUsedIn } from "@/lib/liquids/used-in";

export const GET = route({
  permission: "read",
  summary: "Campaigns that have a lot of a liquid bound to a slot, newest first",
  params: idParams,
  query: pageQuery,
  answer: usedInPage,
  handle: ({ params, query }) => findUsedIn({ liquidId: params.id, ...query }),
});
