import { route } from "@/lib/http/route";
import { rigTokenParams, tokenAnswer } from "@/lib/rigs/schema";
import { getAgentToken } from "@/lib/rigs/tokens";

export const GET = route({
  permission: "agent tokens",
  summary: "One token of a rig's agent, without its secret",
  params: rigTokenParams,
  answer: tokenAnswer,
  handle: ({ person, params }) => getAgentToken({ by: person, rigId: params.id, tokenId: params.tokenId }),
});
