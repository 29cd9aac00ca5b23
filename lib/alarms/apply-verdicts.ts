import type { Transaction } from "sequelize";
import { carryOutBreach } from "@/lib/alarms/carry-out-breach";
import { returnAlarm } from "@/lib/alarms/return-alarm";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import type { Verdict } from "@/lib/limits/verdict";
import type { ClosedPhase } from "@/lib/phases/close-phase";
import type { Limit } from "@/lib/protocol/schema";

type Apply = { campaign: CampaignRow; phase: ClosedPhase; stepId: string; verdicts: readonly Verdict[]; now: Date };

/** Does what the limits say of a closed phase: carries breaches out, lets alarms return. */
export async function applyVerdicts(transaction: Transaction, { campaign, phase, stepId, verdicts, now }: Apply): Promise<void> {
  const { cycle, sequence, phaseId, fitRunId } = phase;
  for (const verdict of verdicts) {
    const limit = campaign.definition.limits.find(({ id }) => id === verdict.limitId) as Limit;
    if (verdict.state === "breach") await carryOutBreach(transaction, { campaign, limit, found: verdict, at: { cycle, sequence, stepId, phaseId, fitRunId }, now });
    if (verdict.state === "inside") await returnAlarm(transaction, { campaignId: campaign.id, limitId: limit.id, now, text: `Back within the limit: ${verdict.text}` });
  }
}
