import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { tokenAnswer } from "@/lib/people/schema";
import { withdrawToken } from "@/lib/people/tokens";

export const POST = route({
  permission: "own settings",
  summary: "Withdraw a personal access token: one's own, or as administrator anybody's",
  params: idParams,
  answer: tokenAnswer,
  handle: ({ person, params, now }) => withdrawToken({ by: person, now, tokenId: params.id }),
});
