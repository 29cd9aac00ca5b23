import { finishAnswer, finishBody } from "@/lib/agents/schema";
import { agentRoute } from "@/lib/http/agent-route";
import { idParams } from "@/lib/http/ids";
import { finishStep } from "@/lib/steps/finish-step";

export const POST = agentRoute({
  summary: "End a step: done, interrupted or failed",
  params: idParams,
  body: finishBody,
  answer: finishAnswer,
  handle: ({ agent, session, params, body, now }) => finishStep({ agent, session, stepId: params.id, body, now }),
});
