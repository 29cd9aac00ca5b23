import { findNotes, writeNote } from "@/lib/campaigns/notes";
import { noteAnswer, noteBody, notePage } from "@/lib/campaigns/notes-schema";
import { idParams } from "@/lib/http/ids";
import { pageQuery } from "@/lib/http/paging";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "Team notes of a campaign, the newest first",
  params: idParams,
  query: pageQuery,
  answer: notePage,
  handle: ({ params, query }) => findNotes({ campaignId: params.id, query }),
});

export const POST = route({
  permission: "write notes",
  summary: "Write a team note; it stays as it was written",
  params: idParams,
  body: noteBody,
  answer: noteAnswer,
  status: 201,
  handle: ({ person, params, body, now }) => writeNote({ by: person, campaignId: params.id, text: body.text, now }),
});
