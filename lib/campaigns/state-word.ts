import type { HoldReason } from "@/lib/campaigns/open-hold";
import type { CampaignState } from "@/lib/campaigns/schema";

const WORDS: Record<Exclude<CampaignState, "held">, string> = {
  draft: "Draft",
  queued: "Queued",
  running: "Measuring",
  finished: "Finished",
  stopped: "Stopped early",
  failed: "Failed",
};

/** The screen's word for a campaign's state. Of several holds the one that needs a person most decides: halted, then waiting, then paused. */
export function stateWord(state: CampaignState, openHolds: readonly HoldReason[] = []): string {
  if (state !== "held") return WORDS[state];
  if (openHolds.some((reason) => reason === "limit" || reason === "failure" || reason === "silence")) return "Halted";
  return openHolds.includes("task") ? "Waiting" : "Paused";
}
