import { heartbeat } from "@/lib/agents/heartbeat";
import { heartbeatAnswer, heartbeatBody } from "@/lib/agents/schema";
import { agentRoute } from "@/lib/http/agent-route";

export const POST = agentRoute({
  summary: "Say how the rig is, keep the lease, learn what is wished",
  body: heartbeatBody,
  answer: heartbeatAnswer,
  handle: ({ agent, session, body, now }) => heartbeat({ agent, session, body, now }),
});
