import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { closePerson } from "@/lib/people/change-person";
import { personAnswer } from "@/lib/people/schema";

/** Closing a closed account succeeds and changes nothing. */
export const POST = route({
  permission: "people",
  summary: "Close an account: its sessions and tokens end at once, its name stays on old records",
  params: idParams,
  answer: personAnswer,
  handle: ({ person, params, now }) => closePerson({ by: person, now, personId: params.id }),
});
