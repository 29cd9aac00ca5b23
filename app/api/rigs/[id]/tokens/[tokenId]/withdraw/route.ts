import { route } from "@/lib/http/route";
import { rigTokenParams } from "@/lib/rigs/schema";
import { revokeAgentToken } from "@/lib/rigs/tokens";
import { created } from "@/lib/schema";

export const POST = route({
  permission: "agent tokens",
  summary: "Withdraw a token; its agent is refused from the next call on",
  params: rigTokenParams,
  answer: created,
  handle: ({ person, params, now }) => revokeAgentToken({ by: person, now, rigId: params.id, tokenId: params.tokenId }),
});
