import type { Transaction } from "sequelize";
import { audit } from "@/lib/audit/record";
import { recordEvent } from "@/lib/campaigns/record-event";
import { change, inTransaction, row, rows } from "@/lib/db";
import { impossible, notFound } from "@/lib/errors";
import type { PhaseAfter } from "@/lib/exclusions/schema";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";
import { refreshPhaseInEveryRun } from "@/lib/phases/close-phase";

type Exclude = { by: Actor; campaignId: string; phaseId: string; indices: readonly number[]; why: string; now: Date };

/**
 * Leaves repeats out of their phase value, with a reason. The readings stay as they are, and so do decisions that were made with them. What is
 * left out already stays so under its first reason. @throws AppError 403, 404, 422 naming indices that were not measured.
 */
export function excludeReadings({ by, campaignId, phaseId, indices, why, now }: Exclude): Promise<{ ids: string[]; phase: PhaseAfter }> {
  return inTransaction(async (transaction) => {
    demand(by, "exclude readings");
    const phase = await row<{ stepId: string; sequence: number; cycle: number; medium: string }>(
      `select step_id as "stepId", sequence, cycle, medium from phase where id = $1 and campaign_id = $2 for no key update`,
      [phaseId, campaignId],
      transaction,
    );
    if (!phase) throw notFound("phase of this campaign");
    const wanted = [...new Set(indices)];
    const measured = new Set((await rows<{ idx: number }>(`select idx from reading where step_id = $1 and idx = any($2)`, [phase.stepId, wanted], transaction)).map(({ idx }) => idx));
    const missing = wanted.filter((index) => !measured.has(index));
    if (missing.length > 0) {
      const list = missing.slice(0, 10).join(", ");
      throw impossible(`These repeats were not measured: ${list}${missing.length > 10 ? " …" : ""}`, { errors: [{ path: "indices", message: `not measured: ${list}` }] });
    }
    const made = await rows<{ id: string }>(
      `insert into exclusion (step_id, idx, person_id, at, why) select $1, idx, $3, $4, $5 from unnest($2::int[]) idx
       on conflict (step_id, idx) where undone_at is null do nothing returning id`,
      [phase.stepId, wanted, by.id, now, why],
      transaction,
    );
    if (made.length > 0) {
      const n = made.length;
      await refreshPhaseInEveryRun(transaction, { stepId: phase.stepId, now });
      await audit(transaction, { by, now, action: "leave out", entity: "campaign", entityId: campaignId, detail: { phaseId, indices: wanted, why } });
      await recordEvent(transaction, {
        campaignId,
        now,
        kind: "exclusion",
        who: by.name,
        text: `Left out ${n === 1 ? "a repeat" : `${n} repeats`} in ${phase.medium}, cycle ${phase.cycle}: ${why}`,
        sequence: phase.sequence,
        readingIndex: Math.min(...wanted),
      });
      await notify(`changed:campaign:${campaignId}`, transaction);
    }
    return { ids: made.map(({ id }) => id), phase: await phaseAfter(transaction, phaseId) };
  });
}

type TakeBack = { by: Actor; exclusionId: string; why: string; now: Date };

/** Takes a repeat that was left out back in; both acts stay on record. @throws AppError 403, 404. */
export function takeBackExclusion({ by, exclusionId, why, now }: TakeBack): Promise<{ id: string; phase: PhaseAfter }> {
  return inTransaction(async (transaction) => {
    demand(by, "exclude readings");
    const found = await row<{ phaseId: string; campaignId: string; stepId: string; idx: number; undoneAt: Date | null; sequence: number; cycle: number; medium: string }>(
      `select p.id as "phaseId", p.campaign_id as "campaignId", p.step_id as "stepId", e.idx, e.undone_at as "undoneAt", p.sequence, p.cycle, p.medium
         from exclusion e join phase p on p.step_id = e.step_id where e.id = $1 for no key update`,
      [exclusionId],
      transaction,
    );
    if (!found) throw notFound("exclusion");
    const { phaseId, campaignId, stepId, idx, sequence } = found;
    if (!found.undoneAt) {
      await change(`update exclusion set undone_by = $2, undone_at = $3 where id = $1`, [exclusionId, by.id, now], transaction);
      await refreshPhaseInEveryRun(transaction, { stepId, now });
      await audit(transaction, { by, now, action: "take back in", entity: "campaign", entityId: campaignId, detail: { phaseId, index: idx, exclusionId, why } });
      const text = `Took repeat ${idx + 1} in ${found.medium}, cycle ${found.cycle}, back in: ${why}`;
      await recordEvent(transaction, { campaignId, now, kind: "exclusion", who: by.name, text, sequence, readingIndex: idx });
      await notify(`changed:campaign:${campaignId}`, transaction);
    }
    return { id: exclusionId, phase: await phaseAfter(transaction, phaseId) };
  });
}

async function phaseAfter(transaction: Transaction, phaseId: string): Promise<PhaseAfter> {
  const found = await row<{ n: number; nUsed: number; f0Mean: number | null; f0U: number | null; qMean: number | null; qU: number | null }>(
    `select s.n, s.n_used as "nUsed", s.f0_mean as "f0Mean", s.f0_u as "f0U", s.q_mean as "qMean", s.q_u as "qU"
       from phase p join fit_run r on r.campaign_id = p.campaign_id and r.current join phase_summary s on s.phase_id = p.id and s.fit_run_id = r.id where p.id = $1`,
    [phaseId],
    transaction,
  );
  const { n = 0, nUsed = 0, f0Mean = null, f0U = null, qMean = null, qU = null } = found ?? {};
  return { phaseId, n, nUsed, f0: { mean: f0Mean, u: f0U }, q: { mean: qMean, u: qU } };
}
