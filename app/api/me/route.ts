import { route } from "@/lib/http/route";
import { changeMe, getMe } from "@/lib/people/me";
import { changeMeBody, meAnswer } from "@/lib/people/schema";

export const GET = route({
  permission: "own settings",
  summary: "Who is signed in, the laboratory, and the count of alarms that nobody has",
  answer: meAnswer,
  handle: ({ person, now }) => getMe({ by: person, now }),
});

export const PATCH = route({
  permission: "own settings",
  summary: "Change one's own name or what one is told of by mail",
  body: changeMeBody,
  answer: meAnswer,
  handle: ({ person, body, now }) => changeMe({ by: person, now, ...body }),
});
