import type { Transaction } from "sequelize";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { openHold } from "@/lib/campaigns/open-hold";
import { wakeCampaign } from "@/lib/campaigns/wake-campaign";
import { change, row } from "@/lib/db";
import type { StepFailure } from "@/models/json";

type FailStep = { step: { id: string; campaignId: string; rigId: string }; failure: StepFailure; now: Date };

/** Nothing more can be tried by itself: the step has failed, the campaign holds, and people are told. `resume` here issues it again. */
export async function failStep(transaction: Transaction, { step, failure, now }: FailStep): Promise<void> {
  await change(
    `update step set state = 'failed', closed_at = $2, lease = null, lease_expires_at = null, failure = $3 where id = $1`,
    [step.id, now, JSON.stringify(failure)],
    transaction,
  );
  const where = await row<{ label: string; kind: string; liquid: string | null; rig: string; sensorId: string; clock: Date | null }>(
    `select s.label, s.kind, liquid.name as liquid, rig.name as rig, c.sensor_id as "sensorId",
            case when rig.clock = 'real' then $2::timestamptz else rig.reported_clock end as clock
       from step s join campaign c on c.id = s.campaign_id join rig on rig.id = s.rig_id
       left join campaign_slot slot on slot.campaign_id = c.id and slot.slot = coalesce(s.slot, s.medium)
       left join lot on lot.id = slot.lot_id left join liquid on liquid.id = lot.liquid_id
      where s.id = $1`,
    [step.id, now],
    transaction,
  );
  if (!where) throw new Error(`step ${step.id} is gone`);
  const text = `could not ${actOf(where)}: ${failure.message || failure.code}`;
  await openHold(transaction, { campaignId: step.campaignId, reason: "failure", text, by: "longreed", now });
  await openAlarm(transaction, {
    now,
    clock: where.clock,
    rigId: step.rigId,
    campaignId: step.campaignId,
    sensorId: where.sensorId,
    source: "system",
    kind: `step-${failure.code}`,
    stepId: step.id,
    text: `${where.rig}: ${text}`,
    actionText: "The step was given up and the campaign holds.",
    mail: true,
  });
  await wakeCampaign(transaction, step.campaignId);
}

/** "fill Brine B-35", as after "could not". */
function actOf({ kind, label, liquid }: { kind: string; label: string; liquid: string | null }): string {
  switch (kind) {
    case "measure":
      return `measure in ${liquid ?? "air"}`;
    case "fill":
      return `fill ${liquid ?? "the cell"}`;
    case "rinse":
      return `rinse with ${liquid ?? "the liquid"}`;
    case "drain":
      return "drain the cell";
    case "dry":
      return "dry the cell";
    default:
      return `${label.charAt(0).toLowerCase()}${label.slice(1)}`;
  }
}
