import type { Wish } from "@/lib/agents/schema";

type Wishing = { state: string; parking: string; detour: string | null };

/** What the agent should do with the step in hand. Park steps of a held or stopped campaign go on. */
export function wishFor(campaign: Wishing | undefined): Wish {
  if (!campaign) return "none";
  if (campaign.detour === "park") return "none";
  if (campaign.state === "held") return "hold";
  if (campaign.state === "running") return "none";
  return "stop";
}
