import { route } from "@/lib/http/route";
import { findContacts } from "@/lib/rigs/contacts";
import { contactsAnswer } from "@/lib/rigs/schema";

export const GET = route({
  permission: "read",
  summary: "How often each rig's agent was heard in the last 24 hours",
  answer: contactsAnswer,
  handle: ({ now }) => findContacts({ now }),
});
