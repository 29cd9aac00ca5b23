import { z } from "zod";
import { Answer } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { askForReset } from "@/lib/people/password-reset";
import { askResetBody } from "@/lib/people/schema";
import { placeOf } from "@/lib/people/throttle";

export const POST = route({
  permission: "public",
  summary: "Ask for a link to choose a new password; the answer does not tell whether the address is known",
  body: askResetBody,
  answer: z.object({}),
  status: 202,
  async handle({ body, now, request }) {
    await askForReset({ email: body.email, place: placeOf(request.headers), now });
    return new Answer(202, {});
  },
});
