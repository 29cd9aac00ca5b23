import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getMount } from "@/lib/mounts/read";
import { mountAnswer } from "@/lib/mounts/schema";

export const GET = route({
  permission: "read",
  summary: "One mount",
  params: idParams,
  answer: mountAnswer,
  handle: ({ params }) => getMount(params.id),
});
