import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";
import { findInvitations, invite } from "@/lib/people/invitations";
import { invitationBody, invitationsPage, invitedAnswer } from "@/lib/people/schema";

export const GET = route({
  permission: "people",
  summary: "List invitations, newest first",
  query: pageQuery,
  answer: invitationsPage,
  handle: ({ person, query, now }) => findInvitations({ by: person, now, ...query }),
});

export const POST = route({
  permission: "people",
  summary: "Invite a person by mail; an open invitation to the same address is replaced",
  body: invitationBody,
  answer: invitedAnswer,
  status: 201,
  shownOnce: true,
  handle: ({ person, body, now }) => invite({ by: person, now, ...body }),
});
