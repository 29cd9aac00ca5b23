import type { Transaction } from "sequelize";
import { openHold } from "@/lib/campaigns/open-hold";
import { openTask } from "@/lib/tasks/open-task";

type WaitForBottle = {
  step: { id: string; campaignId: string; rigId: string; label: string; port: number | null };
  failure: { code: "port-empty" | "waste-full" | string; message: string };
  now: Date;
};

/** An empty bottle or a full waste container is a person's errand, not a failure: a task, and the campaign waits. No attempt is used. */
export async function waitForBottle(transaction: Transaction, { step, failure, now }: WaitForBottle): Promise<void> {
  const empty = failure.code === "port-empty";
  const told = failure.message ? ` The rig agent says: ${failure.message}` : "";
  const instruction = empty
    ? `Load port ${step.port ?? "?"}: it ran empty during "${step.label}".${told}`
    : `Empty the waste container: it was full at "${step.label}".${told}`;
  const holdId = await openHold(transaction, { campaignId: step.campaignId, reason: "task", text: instruction, by: "longreed", now });
  await openTask(transaction, {
    rigId: step.rigId,
    campaignId: step.campaignId,
    stepId: step.id,
    holdId,
    kind: empty ? "load" : "waste",
    urgency: "high",
    port: step.port,
    instruction,
    now,
  });
}
