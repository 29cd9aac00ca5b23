import type { Transaction } from "sequelize";
import { openHold } from "@/lib/campaigns/open-hold";
import { openTask } from "@/lib/tasks/open-task";
import { change } from "@/lib/db";
import type { OpenStep } from "@/lib/steps/give-out";

/** A pumping step was lost on the way: nobody knows how much is in the cell, so a person looks before anything is pumped again. */
export async function askForALook(transaction: Transaction, { step, now }: { step: OpenStep; now: Date }): Promise<void> {
  await change(`update step set state = 'ready', lease = null, lease_expires_at = null where id = $1`, [step.id], transaction);
  const text = `Nobody knows how far "${step.label}" came before the rig agent was lost`;
  const holdId = await openHold(transaction, { campaignId: step.campaignId, reason: "task", text, by: "longreed", now });
  await openTask(transaction, {
    rigId: step.rigId,
    campaignId: step.campaignId,
    stepId: step.id,
    holdId,
    kind: "look",
    urgency: "high",
    port: step.port,
    instruction: `Look at the cell. ${text}. Empty the cell by hand; the step then runs again from its start.`,
    now,
  });
}
