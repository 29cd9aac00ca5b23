import type { CampaignAnswer } from "@/lib/campaigns/answers";

export type HoldAnswer = CampaignAnswer["holds"][number];

/** Why a campaign is held, in a word or two. */
export const HOLD_WORDS: Record<HoldAnswer["reason"], string> = {
  person: "Paused by a person",
  task: "Waits for a task",
  limit: "A limit was broken",
  failure: "A step failed",
  silence: "The rig is silent",
  takeOver: "Taken over by hand",
  setAside: "Set aside",
};
