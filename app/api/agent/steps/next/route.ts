import { nextBody, stepAnswer } from "@/lib/agents/schema";
import { agentRoute } from "@/lib/http/agent-route";
import { nextStep } from "@/lib/steps/next-step";

export const dynamic = "force-dynamic";

export const POST = agentRoute({
  summary: "Ask for the next step; waits for up to `waitS` seconds",
  body: nextBody,
  answer: stepAnswer.optional(),
  handle: ({ agent, session, body, request }) => nextStep({ agent, session, body, now: () => new Date(), signal: request.signal }),
});
