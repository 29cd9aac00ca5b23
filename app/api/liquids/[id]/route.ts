import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getLiquid } from "@/lib/liquids/read";
import { liquidAnswer, liquidChange } from "@/lib/liquids/schema";
import { updateLiquid } from "@/lib/liquids/update";

export const GET = route({
  permission: "read",
  summary: "One liquid",
  params: idParams,
  answer: liquidAnswer,
  handle: ({ params }) => getLiquid(params.id),
});

export const PATCH = route({
  permission: "edit liquids",
  summary: "Change name, letter or hazards of a liquid",
  params: idParams,
  body: liquidChange,
  answer: liquidAnswer,
  handle: ({ person, params, body, now }) => updateLiquid({ by: person, now, liquidId: params.id, ...body }),
});
