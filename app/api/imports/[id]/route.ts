import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getImport } from "@/lib/imports/read";
import { importRunAnswer } from "@/lib/imports/schema";

export const GET = route({
  permission: "read",
  summary: "An import with how far it is",
  params: idParams,
  answer: importRunAnswer,
  handle: ({ params, now }) => getImport({ importRunId: params.id, now }),
});
