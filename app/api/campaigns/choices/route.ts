import { findChoices } from "@/lib/campaigns/choices";
import { choicesAnswer } from "@/lib/campaigns/draft-schema";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "edit campaigns",
  summary: "What a campaign can be made of: protocol versions, sensors, rigs with ports, lots",
  answer: choicesAnswer,
  handle: () => findChoices(),
});
