import { readingsAnswer, readingsContract } from "@/lib/agents/schema";
import { agentRoute } from "@/lib/http/agent-route";
import { parseReadings } from "@/lib/readings/parse-readings";
import { storeReadings } from "@/lib/readings/store-readings";
import { idParams } from "@/lib/http/ids";

export const POST = agentRoute({
  summary: "Upload readings of a `measure` step",
  params: idParams,
  parse: parseReadings,
  contract: readingsContract,
  answer: readingsAnswer,
  handle: ({ agent, session, params, body, now }) => storeReadings({ agent, session, stepId: params.id, body, now }),
});
