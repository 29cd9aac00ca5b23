import { route } from "@/lib/http/route";
import { createPerson } from "@/lib/people/create-person";
import { findPeople } from "@/lib/people/find-people";
import { createPersonBody, peoplePage, peopleQuery, personAnswer } from "@/lib/people/schema";

export const GET = route({
  permission: "people",
  summary: "List people by name",
  query: peopleQuery,
  answer: peoplePage,
  handle: ({ person, query }) => findPeople({ by: person, ...query }),
});

export const POST = route({
  permission: "people",
  summary: "Make an account with a password; an invitation is the better way",
  body: createPersonBody,
  answer: personAnswer,
  status: 201,
  handle: ({ person, body, now }) => createPerson({ by: person, now, ...body }),
});
