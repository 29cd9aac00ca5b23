import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { getTask } from "@/lib/tasks/read";
import { taskAnswer } from "@/lib/tasks/schema";

export const GET = route({
  permission: "read",
  summary: "One task",
  params: idParams,
  answer: taskAnswer,
  handle: ({ params }) => getTask(params.id),
});
