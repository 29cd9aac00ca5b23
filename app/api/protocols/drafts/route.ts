import { route } from "@/lib/http/route";
import { beginDraft } from "@/lib/protocols/save-draft";
import { draftBody, draftSaved } from "@/lib/protocols/schema";

export const POST = route({
  permission: "edit protocols",
  summary: "Begin a protocol that has no version yet",
  description: "The draft may be half-written; it is judged when it is saved as a version.",
  body: draftBody,
  answer: draftSaved,
  status: 201,
  handle: ({ person, body, now }) => beginDraft({ by: person, now, ...body }),
});
