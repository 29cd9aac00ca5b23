import { route } from "@/lib/http/route";
import { resetPassword } from "@/lib/people/password-reset";
import { resetPasswordBody } from "@/lib/people/schema";

export const POST = route({
  permission: "public",
  summary: "Choose a new password with the token of a reset link; all sessions of the account end",
  body: resetPasswordBody,
  handle: ({ body, now }) => resetPassword({ now, ...body }),
});
