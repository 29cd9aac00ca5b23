import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { emptyWaste } from "@/lib/rigs/empty-waste";
import { wasteAnswer } from "@/lib/rigs/schema";

export const POST = route({
  permission: "record loads",
  summary: "Record that the waste container was emptied",
  params: idParams,
  answer: wasteAnswer,
  handle: ({ person, params, now }) => emptyWaste({ by: person, now, rigId: params.id }),
});
