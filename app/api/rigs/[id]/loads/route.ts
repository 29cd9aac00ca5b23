import { idParams } from "@/lib/http/ids";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { findLoads } from "@/lib/rigs/loads";
import { recordLoad } from "@/lib/rigs/record-load";
import { loadBody, loadPage } from "@/lib/rigs/schema";
import { created } from "@/lib/schema";

export const GET = route({
  permission: "read",
  summary: "What was put on a rig's ports, newest first",
  params: idParams,
  query: pageQuery,
  answer: loadPage,
  handle: ({ params, query }) => findLoads({ rigId: params.id, ...query }),
});

export const POST = route({
  permission: "record loads",
  summary: "Record a bottle put on a port or topped up",
  description: "Another lot of the same liquid in mid-campaign is 409 `other-lot` until `confirm` is true; another liquid is 422.",
  params: idParams,
  body: loadBody,
  answer: created,
  status: 201,
  handle: ({ person, params, body, now }) => recordLoad({ by: person, now, rigId: params.id, ...body }),
});
