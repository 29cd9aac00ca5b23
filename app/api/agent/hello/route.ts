import { hello } from "@/lib/agents/hello";
import { helloAnswer, helloBody } from "@/lib/agents/schema";
import { agentRoute } from "@/lib/http/agent-route";

export const POST = agentRoute({
  summary: "Introduce the agent and begin a session",
  body: helloBody,
  answer: helloAnswer,
  handle: ({ agent, body, now }) => hello({ agent, body, now }),
});
