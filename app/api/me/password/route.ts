import { notAllowed } from "@/lib/errors";
import { route } from "@/lib/http/route";
import { changePassword } from "@/lib/people/me";
import { changePasswordBody } from "@/lib/people/schema";
import { placeOf } from "@/lib/people/throttle";

export const POST = route({
  permission: "own settings",
  summary: "Change one's own password; all sessions end, this one too",
  body: changePasswordBody,
  handle({ person, body, now, request }) {
    if (person.tokenId) throw notAllowed("A token cannot change the password: sign in");
    return changePassword({ by: person, now, place: placeOf(request.headers), ...body });
  },
});
