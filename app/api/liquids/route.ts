import { route } from "@/lib/http/route";
import { createLiquid } from "@/lib/liquids/create";
import { findLiquids } from "@/lib/liquids/read";
import { liquidBody, liquidCreated, liquidPage, liquidQuery } from "@/lib/liquids/schema";

export const GET = route({
  permission: "read",
  summary: "Liquids by name, with properties and hazards",
  query: liquidQuery,
  answer: liquidPage,
  handle: ({ query }) => findLiquids(query),
});

export const POST = route({
  permission: "edit liquids",
  summary: "Record a liquid with its property model and hazards",
  description: "Its letter in run strips is chosen from the name unless given.",
  body: liquidBody,
  answer: liquidCreated,
  status: 201,
  handle: ({ person, body, now }) => createLiquid({ by: person, now, ...body }),
});
