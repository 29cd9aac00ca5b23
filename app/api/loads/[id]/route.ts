import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getLoad } from "@/lib/rigs/loads";
import { loadAnswer } from "@/lib/rigs/schema";

export const GET = route({
  permission: "read",
  summary: "One load: what was put on a port, when and by whom",
  params: idParams,
  answer: loadAnswer,
  handle: ({ params }) => getLoad(params.id),
});
