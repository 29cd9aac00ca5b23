import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { sendAgain } from "@/lib/notifications/send-again";
import { created } from "@/lib/schema";

export const POST = route({
  permission: "settings",
  summary: "Try a mail again that could not be delivered",
  params: idParams,
  answer: created,
  handle: ({ person, params, now }) => sendAgain({ by: person, now, notificationId: params.id }),
});
