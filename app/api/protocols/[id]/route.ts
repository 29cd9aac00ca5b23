import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getProtocol } from "@/lib/protocols/read";
import { changeProtocol, deleteDraft } from "@/lib/protocols/save-draft";
import { draftSaved, protocolAnswer, protocolChange } from "@/lib/protocols/schema";

export const GET = route({
  permission: "read",
  summary: "One protocol with its draft and its versions",
  params: idParams,
  answer: protocolAnswer,
  handle: ({ params }) => getProtocol(params.id),
});

export const PATCH = route({
  permission: "edit protocols",
  summary: "Rename a protocol, or save the draft of its next version",
  params: idParams,
  body: protocolChange,
  answer: draftSaved,
  handle: ({ person, params, body, now }) => changeProtocol({ by: person, now, protocolId: params.id, ...body }),
});

export const DELETE = route({
  permission: "edit protocols",
  summary: "Delete a protocol that never had a version",
  params: idParams,
  handle: ({ person, params, now }) => deleteDraft({ by: person, now, protocolId: params.id }),
});
