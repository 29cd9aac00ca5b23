import { stateWord } from "@/lib/campaigns/state-word";
import type { RigAnswer } from "@/lib/rigs/schema";

/** What a rig does, in the screen's words. */
export const rigWord = ({ campaign }: RigAnswer): string => (campaign ? stateWord(campaign.state, campaign.holds) : "Free");
