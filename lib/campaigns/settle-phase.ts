import type { Transaction } from "sequelize";
import { applyVerdicts } from "@/lib/alarms/apply-verdicts";
import type { CampaignRow } from "@/lib/campaigns/campaign-row";
import type { StepState } from "@/lib/campaigns/steps-of-campaign";
import { rows } from "@/lib/db";
import { judgePhase } from "@/lib/limits/judge";
import type { LimitFacts } from "@/lib/limits/verdict";
import { notify } from "@/lib/notify";
import { updateBaseline } from "@/lib/phases/baseline";
import { closePhase, type ClosedPhase } from "@/lib/phases/close-phase";
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
    const facts = await limitFacts(transaction, campaign, phase, baseline);
    await applyVerdicts(transaction, { campaign, phase, stepId: step.id, verdicts: judgePhase(campaign.definition.limits, facts), now });
  }
  await notify(`changed:campaign:${campaign.id}`, transaction);
  return true;
}

/** A failed step of a campaign that holds for it: `resume` here gives it out again, with its readings. */
const mayBeGivenOutAgain = ({ state, parking, cursor }: CampaignRow, step: StepState): boolean =>
  step.state === "failed" && state === "held" && (parking === "none" || (parking === "parked" && !cursor?.parked));

/** The closed phase and its like since the baseline began: same mount, set-point, medium and role. */
async function limitFacts(transaction: Transaction, campaign: CampaignRow, phase: ClosedPhase, baseline: LimitFacts["baseline"]): Promise<LimitFacts> {
  const like = await rows<{ at: Date; f0Hz: number; q: number }>(
    `select p.started_at as at, s.f0_mean as "f0Hz", s.q_mean as q
       from phase p join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2
      where p.campaign_id = $1 and p.medium = $3 and p.role = $4 and p.mount_id = $5 and p.set_point_c is not distinct from $6
        and p.sequence <= $7 and s.f0_mean is not null and s.q_mean is not null and p.started_at is not null
      order by p.sequence`,
    [campaign.id, phase.fitRunId, phase.medium, phase.role, phase.mountId, phase.setPointC, phase.sequence],
    transaction,
  );
  const startMs = like[0]?.at.getTime() ?? 0;
  const { values, columns } = phase;
  const measured = columns.temperatureC.filter(Number.isFinite);
  return {
    phase: {
      medium: phase.medium,
      role: phase.role,
      n: values.n,
      unusable: values.unusable,
      ...(values.nUsed > 0 ? { f0Hz: values.f0.mean, q: values.q.mean } : {}),
      ...(measured.length > 0 ? { minC: least(measured), maxC: -least(measured.map((t) => -t)) } : {}),
    },
    baseline,
    series: {
      atDays: Float64Array.from(like, ({ at }) => (at.getTime() - startMs) / 86_400_000),
      f0Hz: Float64Array.from(like, ({ f0Hz }) => f0Hz),
      q: Float64Array.from(like, ({ q }) => q),
    },
  };
}

const least = (values: Float64Array): number => values.reduce((a, b) => Math.min(a, b), Infinity);
