import { readFitRun } from "@/lib/fit-runs/read";
import { fitRunAnswer } from "@/lib/fit-runs/schema";
import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";

export const GET = route({
  permission: "read",
  summary: "One fit run, with how far it is",
  params: idParams,
  answer: fitRunAnswer,
  handle: ({ params }) => readFitRun({ fitRunId: params.id }),
});
