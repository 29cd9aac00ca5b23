import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { unblockTime } from "@/lib/rigs/block-time";
import { created } from "@/lib/schema";

export const POST = route({
  permission: "edit rigs",
  summary: "Withdraw a blocked time",
  params: idParams,
  answer: created,
  handle: ({ person, params, now }) => unblockTime({ by: person, now, windowId: params.id }),
});
