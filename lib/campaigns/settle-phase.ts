import type { Transaction } from "sequelize";
import { applyVerdicts } from "@/lib/alarms/apply-verdicts";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import type { StepState } from "@/lib/campaigns/steps-of-campaign";
import { judgePhase } from "@/lib/limits/judge";
import { notify } from "@/lib/notify";
import { updateBaseline } from "@/lib/phases/baseline";
import { closePhase } from "@/lib/phases/close-phase";
import { limitFacts } from "@/lib/phases/limit-facts";
import { updateTrack } from "@/lib/phases/update-track";
import { fitRest } from "@/lib/readings/fit-step";

type Settle = { campaign: CampaignRow; step: StepState; now: Date };

/**
 * Closes the phase of a measure step that has ended: its value, the track for the next sweep, the baseline, and what the
 * limits say. Happens once a phase; returns whether it did anything.
 */
export async function settlePhase(transaction: Transaction, { campaign, step, now }: Settle): Promise<boolean> {
  if (step.kind !== "measure" || step.state === "ready" || step.state === "out") return false;
  if (step.settled && step.role !== "find") return false;
  await fitRest(transaction, step.id);
  await updateTrack(transaction, { stepId: step.id });
  if (step.settled || mayBeGivenOutAgain(campaign, step)) return false;
  const phase = await closePhase(transaction, { stepId: step.id, now });
  if (!phase || phase.columns.n === 0) return false;

  const baseline = phase.mountId
    ? await updateBaseline(
        transaction,
        { campaignId: campaign.id, mountId: phase.mountId, setPointC: phase.setPointC, readout: phase.readout, fitRunId: phase.fitRunId },
        { airReferences: campaign.definition.baseline.airReferences, now },
      )
    : undefined;
  if (campaign.definition.limits.length > 0) {
    const facts = await limitFacts(transaction, { campaignId: campaign.id, phase, baseline });
    await applyVerdicts(transaction, { campaign, phase, stepId: step.id, verdicts: judgePhase(campaign.definition.limits, facts), now });
  }
  await notify(`changed:campaign:${campaign.id}`, transaction);
  return true;
}

/** A failed step of a campaign that holds for it: `resume` here gives it out again, with its readings. */
const mayBeGivenOutAgain = ({ state, parking, cursor }: CampaignRow, step: StepState): boolean =>
  step.state === "failed" && state === "held" && (parking === "none" || (parking === "parked" && !cursor?.parked));
