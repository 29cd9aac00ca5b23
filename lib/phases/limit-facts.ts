import type { Transaction } from "sequelize";
import { rows } from "@/lib/db";
import type { LimitFacts } from "@/lib/limits/verdict";
import type { ClosedPhase } from "@/lib/phases/close-phase";

type About = { campaignId: string; phase: ClosedPhase; baseline: LimitFacts["baseline"] };

/** What limits need to know of a phase: the closed one, and its like since the baseline began: same mount, set-point, medium and role. */
export async function limitFacts(transaction: Transaction, { campaignId, phase, baseline }: About): Promise<LimitFacts> {
  const like = await rows<{ at: Date; f0Hz: number; q: number }>(
    `select p.started_at as at, s.f0_mean as "f0Hz", s.q_mean as q
       from phase p join phase_summary s on s.phase_id = p.id and s.fit_run_id = $2
      where p.campaign_id = $1 and p.medium = $3 and p.role = $4 and p.mount_id = $5 and p.set_point_c is not distinct from $6
        and p.sequence <= $7 and s.f0_mean is not null and s.q_mean is not null and p.started_at is not null
      order by p.sequence`,
    [campaignId, phase.fitRunId, phase.medium, phase.role, phase.mountId, phase.setPointC, phase.sequence],
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
