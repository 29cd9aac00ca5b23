import type { CampaignAnswer } from "@/lib/campaigns/answers";

/** What changed, said politely to whoever listens: the state and the step, not each repeat. */
export function LiveWords({ campaign: { word, cycle, step } }: { campaign: CampaignAnswer }) {
  return <p className="visually-hidden" role="status">{[word, cycle > 0 && `cycle ${cycle}`, step?.label].filter(Boolean).join(", ")}</p>;
}
