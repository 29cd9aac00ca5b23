import { route } from "@/lib/http/route";
import { readTimeline } from "@/lib/rigs/timeline";
import { timelineAnswer } from "@/lib/rigs/timeline-schema";

export const GET = route({
  permission: "read",
  summary: "Five weeks of every rig in use: what runs, what waits in line with its likely end, what is blocked, and what the bottles still have to give",
  answer: timelineAnswer,
  handle: ({ now }) => readTimeline({ now }),
});
