import { route } from "@/lib/http/route";
import { findTasks } from "@/lib/tasks/read";
import { taskPage, taskQuery } from "@/lib/tasks/schema";

export const GET = route({
  permission: "read",
  summary: "What people are to do at the rigs, by when it is due",
  query: taskQuery,
  answer: taskPage,
  handle: ({ query }) => findTasks(query),
});
