import { idParams } from "@/lib/http/ids";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { blockTime, findBlockedTimes } from "@/lib/rigs/block-time";
import { blockTimeBody, blockedTimePage } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";

export const GET = route({
  permission: "read",
  summary: "Times that a rig is kept free for service, soonest first",
  params: idParams,
  query: pageQuery,
  answer: blockedTimePage,
  handle: ({ params, query, now }) => findBlockedTimes({ rigId: params.id, now, ...query }),
});

export const POST = route({
  permission: "edit rigs",
  summary: "Keep a rig free for service from one time to another",
  params: idParams,
  body: blockTimeBody,
  answer: created,
  status: 201,
  handle: ({ person, params, body, now }) => blockTime({ by: person, now, rigId: params.id, ...body }),
});
