import { z } from "zod";
import { makeCurrent } from "@/lib/fit-runs/make-current";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const POST = route({
  permission: "fit again",
  summary: "Use a fit run for the campaign's pages, limits and exports from now on",
  params: idParams,
  answer: z.object({ id: z.string(), current: z.literal(true) }),
  handle: ({ person, params, now }) => makeCurrent({ by: person, fitRunId: params.id, now }),
});
