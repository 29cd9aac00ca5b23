import { AGENT_EXAMPLES } from "@/lib/http/examples/agent-examples";
import { CAMPAIGN_EXAMPLES } from "@/lib/http/examples/campaign-examples";
import { LABORATORY_EXAMPLES } from "@/lib/http/examples/laboratory-examples";

/**
 * Bodies as one would send them, by call (`POST /api/campaigns`) and by what each does. A test holds every one against the
 * schema that validates it, and asks for one of every call with a body.
 */
export const EXAMPLES: Readonly<Record<string, Readonly<Record<string, unknown>>>> = { ...AGENT_EXAMPLES, ...CAMPAIGN_EXAMPLES, ...LABORATORY_EXAMPLES };
