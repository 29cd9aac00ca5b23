import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { openPersonAgain } from "@/lib/people/change-person";
import { personAnswer } from "@/lib/people/schema";

export const POST = route({
  permission: "people",
  summary: "Open a closed account again",
  params: idParams,
  answer: personAnswer,
  handle: ({ person, params, now }) => openPersonAgain({ by: person, now, personId: params.id }),
});
