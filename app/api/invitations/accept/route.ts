import { route } from "@/lib/http/route";
import { acceptInvitation } from "@/lib/people/accept-invitation";
import { acceptInvitationBody, personAnswer } from "@/lib/people/schema";

export const POST = route({
  permission: "public",
  summary: "Accept an invitation with the token of its link: choose name and password",
  body: acceptInvitationBody,
  answer: personAnswer,
  status: 201,
  handle: ({ body, now }) => acceptInvitation({ now, ...body }),
});
