import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { freeRig } from "@/lib/campaigns/free-rig";
import type { StepState } from "@/lib/campaigns/steps-of-campaign";
import { change, row } from "@/lib/db";
import { openTask } from "@/lib/tasks/open-task";

type ParkFailed = { campaign: CampaignRow; step: StepState; now: Date };

/**
 * A park step has failed for good, so the cell is not safe. A held campaign waits for the person who lets it go on; one that has
 * ended keeps its rig until somebody has emptied the cell by hand.
 */
export async function parkFailed(transaction: Transaction, { campaign, step, now }: ParkFailed): Promise<void> {
  if (campaign.state === "held") {
    await change(`update campaign set parking = 'parked' where id = $1`, [campaign.id], transaction);
    return;
  }
  const look = await row<{ answer: "done" | "cannot" | null }>(
    `select answer from operator_task where campaign_id = $1 and step_id = $2 and kind = 'look' order by id desc limit 1`,
    [campaign.id, step.id],
    transaction,
  );
  if (look?.answer === "done") return freeRig(transaction, campaign);
  if (look && look.answer === null) return;
  await openTask(transaction, {
    rigId: campaign.rigId,
    campaignId: campaign.id,
    stepId: step.id,
    kind: "look",
    urgency: "high",
    instruction: `Empty the cell of ${campaign.rigName} by hand: parking it failed. ${campaign.rigName} stays with ${campaign.name} until then.`,
    now,
  });
}
