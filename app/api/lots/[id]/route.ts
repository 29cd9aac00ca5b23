import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getLot } from "@/lib/liquids/lots";
import { updateLot } from "@/lib/liquids/record-lot";
import { lotAnswer, lotChange } from "@/lib/liquids/schema";

export const GET = route({
  permission: "read",
  summary: "One lot",
  params: idParams,
  answer: lotAnswer,
  handle: ({ params }) => getLot(params.id),
});

export const PATCH = route({
  permission: "edit liquids",
  summary: "Correct dates or certificate of a lot",
  params: idParams,
  body: lotChange,
  answer: lotAnswer,
  handle: ({ person, params, body, now }) => updateLot({ by: person, now, lotId: params.id, ...body }),
});
