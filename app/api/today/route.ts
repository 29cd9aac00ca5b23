import { route } from "@/lib/http/route";
import { readToday } from "@/lib/today/read";
import { todayAnswer } from "@/lib/today/schema";

export const GET = route({
  permission: "read",
  summary: "What runs, what needs a person, what ends when, and what happened since the evening before",
  answer: todayAnswer,
  handle: ({ now }) => readToday({ now }),
});
