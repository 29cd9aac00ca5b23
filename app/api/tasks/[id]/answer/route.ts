import { idParams } from "@/lib/http/ids";
import { route } from "@/lib/http/route";
import { answerTask } from "@/lib/tasks/answer";
import { answerBody, taskAnswer } from "@/lib/tasks/schema";

export const POST = route({
  permission: "answer tasks",
  summary: "Answer a task: done lets its campaign go on, cannot keeps the hold and opens an alarm",
  params: idParams,
  body: answerBody,
  answer: taskAnswer,
  handle: ({ person, params, body, now }) => answerTask({ by: person, now, taskId: params.id, answer: body.answer, note: body.note }),
});
