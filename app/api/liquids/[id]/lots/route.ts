import { idParams } from "@/lib/http/ids";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { findLots } from "@/lib/liquids/lots";
import { recordLot } from "@/lib/liquids/record-lot";
import { lotBody, lotPage } from "@/lib/liquids/schema";
import { created } from "@/lib/schema";

export const GET = route({
  permission: "read",
  summary: "Lots of a liquid, newest first",
  params: idParams,
  query: pageQuery,
  answer: lotPage,
  handle: ({ params, query }) => findLots({ liquidId: params.id, ...query }),
});

export const POST = route({
  permission: "edit liquids",
  summary: "Record a delivered bottle with its certificate",
  params: idParams,
  body: lotBody,
  answer: created,
  status: 201,
  handle: ({ person, params, body, now }) => recordLot({ by: person, now, liquidId: params.id, ...body }),
});
