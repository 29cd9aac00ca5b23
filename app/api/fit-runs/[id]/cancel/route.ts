import { z } from "zod";
import { cancelRefit } from "@/lib/fit-runs/cancel";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "fit again",
  summary: "Give up a fit run that is being made",
  params: idParams,
  answer: z.object({ id: z.string(), state: z.literal("cancelled") }),
  handle: ({ person, params, now }) => cancelRefit({ by: person, fitRunId: params.id, now }),
});
