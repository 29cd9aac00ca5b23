import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { cancelImport } from "@/lib/imports/cancel";
import { importRunAnswer } from "@/lib/imports/schema";

export const POST = route({
  permission: "edit campaigns",
  summary: "End an import that is not done yet; nothing of it stays",
  params: idParams,
  answer: importRunAnswer,
  handle: ({ person, params, now }) => cancelImport({ by: person, importRunId: params.id, now }),
});
