import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { changePerson } from "@/lib/people/change-person";
import { getPerson } from "@/lib/people/find-people";
import { changePersonBody, personAnswer } from "@/lib/people/schema";

export const GET = route({
  permission: "people",
  summary: "Read one person",
  params: idParams,
  answer: personAnswer,
  handle: ({ person, params }) => getPerson({ by: person, personId: params.id }),
});

export const PATCH = route({
  permission: "people",
  summary: "Change name or role; a role holds from the person's next request on",
  params: idParams,
  body: changePersonBody,
  answer: personAnswer,
  handle: ({ person, params, body, now }) => changePerson({ by: person, now, personId: params.id, ...body }),
});
