import type { Transaction } from "sequelize";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import { checkBottle } from "@/lib/campaigns/check-bottle";
import { openHold } from "@/lib/campaigns/open-hold";
import { change, row } from "@/lib/db";
import { notify } from "@/lib/notify";
import type { Cursor, StepPlan } from "@/lib/protocol/types";
import { openTask } from "@/lib/tasks/open-task";

type MakeStep = { campaign: CampaignRow; cursor: Cursor; plan: StepPlan; now: Date };

/** Stores a planned step: an agent's is ready to be given out, a wait has its due time, an ask becomes a task that the campaign waits for. */
export async function makeStep(transaction: Transaction, { campaign, cursor, plan, now }: MakeStep): Promise<void> {
  const measure = plan.kind === "measure" ? plan : undefined;
  const slot = "slot" in plan ? plan.slot : measure && measure.medium !== "air" ? measure.medium : null;
  const dueAt = plan.kind === "wait" ? new Date(plan.params.dueAtMs) : null;
  const made = await row<{ id: string; loadId: string | null }>(
    `insert into step (campaign_id, rig_id, sequence, block_id, protocol_version_id, kind, role, medium, slot, set_point_c, cycle, label, detour,
       params, mount_id, load_id, state, cursor, due_at, created_at, started_clock)
     values ($1, $2, $3, $4, $5, $6, $7, $8, $9, $10, $11, $12, $13, $14, $15,
       (select port.load_id from campaign_slot cs join port on port.rig_id = $2 and port.number = cs.port where cs.campaign_id = $1 and cs.slot = $9),
       'ready', $16, $17, $18, $19)
     returning id, load_id as "loadId"`,
    [
      campaign.id,
      campaign.rigId,
      plan.sequence,
      plan.blockId,
      campaign.protocolVersionId,
      plan.kind,
      measure?.role ?? null,
      measure?.medium ?? null,
      slot,
      plan.setPointC,
      plan.cycle,
      plan.label,
      plan.detour ?? null,
      JSON.stringify(plan.params),
      campaign.mountId,
      JSON.stringify(cursor),
      dueAt,
      now,
      plan.kind === "wait" ? campaign.clock : null,
    ],
    transaction,
  );
  if (!made) throw new Error("a step was not stored");
  if (measure && measure.role !== "find") await makePhase(transaction, { campaign, plan: measure, stepId: made.id, loadId: made.loadId });
  if (plan.kind === "ask") await ask(transaction, campaign, plan, made.id, now);
  else if (plan.kind !== "wait") await notify(`rig:${campaign.rigId}`, transaction);
  if (plan.kind === "fill" || plan.kind === "rinse") await checkBottle(transaction, { campaign, slot: plan.slot, stepId: made.id, now });
  await notify(`changed:campaign:${campaign.id}`, transaction);
}

type MakePhase = { campaign: CampaignRow; plan: Extract<StepPlan, { kind: "measure" }>; stepId: string; loadId: string | null };

async function makePhase(transaction: Transaction, { campaign, plan, stepId, loadId }: MakePhase) {
  await change(
    `insert into phase (campaign_id, step_id, sequence, cycle, medium, role, set_point_c, mount_id, load_id, liquid_id, readout, repeats, discard)
     values ($1, $2, $3, $4, $5, $6, $7, $8, $9,
       (select lot.liquid_id from campaign_slot cs join lot on lot.id = cs.lot_id where cs.campaign_id = $1 and cs.slot = $5), $10, $11, $12)`,
    [
      campaign.id,
      stepId,
      plan.sequence,
      plan.cycle,
      plan.medium,
      plan.role,
      plan.setPointC,
      campaign.mountId,
      loadId,
      campaign.definition.readout,
      plan.params.repeats,
      plan.params.discard,
    ],
    transaction,
  );
}

async function ask(transaction: Transaction, campaign: CampaignRow, plan: Extract<StepPlan, { kind: "ask" }>, stepId: string, now: Date) {
  const { instruction, urgency } = plan.params;
  const holdId = await openHold(transaction, { campaignId: campaign.id, reason: "task", text: instruction, by: "longreed", now });
  await openTask(transaction, { rigId: campaign.rigId, campaignId: campaign.id, stepId, holdId, kind: "ask", urgency, instruction, now });
}
