import { notAllowed } from "@/lib/errors";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { newTokenAnswer, tokenBody, tokensPage } from "@/lib/people/schema";
import { createToken, findTokens } from "@/lib/people/tokens";

export const GET = route({
  permission: "own settings",
  summary: "List one's own personal access tokens, newest first",
  query: pageQuery,
  answer: tokensPage,
  handle: ({ person, query }) => findTokens({ by: person, ...query }),
});

export const POST = route({
  permission: "own settings",
  summary: "Make a personal access token; it is shown this once",
  body: tokenBody,
  answer: newTokenAnswer,
  status: 201,
  shownOnce: true,
  handle({ person, body, now }) {
    if (person.tokenId) throw notAllowed("A token cannot make another one, which would outlive it: sign in");
    return createToken({ by: person, now, ...body });
  },
});
