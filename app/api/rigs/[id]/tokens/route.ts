import { idParams } from "@/lib/http/ids";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { tokenBody, tokenCreated, tokenPage } from "@/lib/rigs/schema";
import { createAgentToken, findAgentTokens } from "@/lib/rigs/tokens";

export const GET = route({
  permission: "agent tokens",
  summary: "Tokens of a rig's agent: of each the last four signs",
  params: idParams,
  query: pageQuery,
  answer: tokenPage,
  handle: ({ person, params, query }) => findAgentTokens({ by: person, rigId: params.id, ...query }),
});

/** The token stands in this answer only. */
export const POST = route({
  permission: "agent tokens",
  summary: "Make a token for a rig's agent; it is shown this once",
  params: idParams,
  body: tokenBody,
  answer: tokenCreated,
  status: 201,
  shownOnce: true,
  handle: ({ person, params, body, now }) => createAgentToken({ by: person, now, rigId: params.id, name: body.name }),
});
