import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { withdrawInvitation } from "@/lib/people/invitations";

export const POST = route({
  permission: "people",
  summary: "Withdraw an open invitation: its link ends",
  params: idParams,
  handle: ({ person, params, now }) => withdrawInvitation({ by: person, now, invitationId: params.id }),
});
