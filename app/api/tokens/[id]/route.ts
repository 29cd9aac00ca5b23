import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { tokenAnswer } from "@/lib/people/schema";
import { getToken } from "@/lib/people/tokens";

export const GET = route({
  permission: "own settings",
  summary: "One of one's own personal access tokens, without its secret",
  params: idParams,
  answer: tokenAnswer,
  handle: ({ person, params }) => getToken({ by: person, tokenId: params.id }),
});
