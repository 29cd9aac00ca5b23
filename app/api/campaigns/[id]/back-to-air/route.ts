import { readBackToAir } from "@/lib/analysis/back-to-air";
import { backToAirAnswer } from "@/lib/analysis/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "How the air reference came back after each clean",
  params: idParams,
  answer: backToAirAnswer,
  handle: ({ params }) => readBackToAir(params.id),
});
