import { idParams, idSchema } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getVersion } from "@/lib/protocols/read";
import { versionAnswer } from "@/lib/protocols/schema";

export const GET = route({
  permission: "read",
  summary: "One version with its definition",
  params: idParams.extend({ versionId: idSchema }),
  answer: versionAnswer,
  handle: ({ params: { id, versionId } }) => getVersion({ protocolId: id, versionId }),
});
