import { route } from "@/lib/http/route";
import { estimateProtocol } from "@/lib/protocols/estimate";
import { estimateAnswer, estimateBody } from "@/lib/protocols/schema";

export const POST = route({
  permission: "read",
  summary: "What a definition would take, and what is wrong or odd with it",
  description: "Nothing is stored. Without a rig its own limits are not checked; without a sensor times are those of a common wire. Paths of problems are within the definition.",
  body: estimateBody,
  answer: estimateAnswer,
  handle: ({ person, body, now }) => estimateProtocol({ by: person, now, ...body }),
});
