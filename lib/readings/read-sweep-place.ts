import { row, rows } from "@/lib/db";
import { valuesIf } from "@/lib/phases/close-phase";
import type { PhaseColumns } from "@/lib/phases/columns";
import type { PhaseSummaryValues } from "@/lib/phases/summarise";
import type { SweepPlace } from "@/lib/readings/schema";

type Where = { campaignId: string; stepId: string; sequence: number; index: number; fitRunId: string | null };
type Place = { sequence: number; index: number };

/** Longer phases are shown by the extremes of neighbours, so that none is lost. */
const MOST_SHOWN = 2000;

/** Where a repeat stands in its phase, its neighbours, and what its phase value would be without it. Null for a sweep that belongs to no phase. */
export async function readSweepPlace(where: Where): Promise<SweepPlace | null> {
  const { stepId, index, fitRunId } = where;
  const phase = await row<{ phaseId: string; role: string; repeats: number; discard: number }>(`select id as "phaseId", role, repeats, discard from phase where step_id = $1`, [stepId]);
  if (!phase || !fitRunId) return null;
  const exclusions = await rows<{ id: string; idx: number; by: string; at: Date; why: string }>(
    `select e.id, e.idx, p.name as by, e.at, e.why from exclusion e join person p on p.id = e.person_id where e.step_id = $1 and e.undone_at is null`,
    [stepId],
  );
  const excluded = new Set(exclusions.map(({ idx }) => idx));
  const otherwise = new Set(excluded);
  if (!otherwise.delete(index)) otherwise.add(index);
  const [now, then, previous, next, nextFlagged] = await Promise.all([
    valuesIf({ stepId, fitRunId, excluded }),
    valuesIf({ stepId, fitRunId, excluded: otherwise }),
    neighbour(where, "previous"),
    neighbour(where, "next"),
    findNextFlagged({ ...where, fitRunId }),
  ]);
  if (!now || !then) return null;
  const own = exclusions.find(({ idx }) => idx === index);
  return {
    ...phase,
    n: now.columns.n,
    previous,
    next,
    nextFlagged,
    values: shownOf(now.columns, index),
    f0: valueOf(now.values.f0),
    q: valueOf(now.values.q),
    excluded: own ? { id: own.id, by: own.by, at: own.at.toISOString(), why: own.why } : null,
    otherwise: { f0: valueOf(then.values.f0), q: valueOf(then.values.q) },
  };
}

const valueOf = ({ mean, u }: PhaseSummaryValues["f0"]): SweepPlace["f0"] => (Number.isFinite(mean) && Number.isFinite(u) ? { mean, u } : null);

/** In the same step, else at the near end of the next measuring step of the campaign. */
async function neighbour({ campaignId, stepId, sequence, index }: Where, side: "previous" | "next"): Promise<Place | null> {
  const [compare, order] = side === "next" ? [">", "asc"] : ["<", "desc"];
  const here = await row<{ index: number }>(`select idx as index from reading where step_id = $1 and idx ${compare} $2 order by idx ${order} limit 1`, [stepId, index]);
  if (here) return { sequence, index: here.index };
  const there = await row<Place>(
    `select s.sequence, r.idx as index
       from (select id, sequence from step where campaign_id = $1 and kind = 'measure' and stored > 0 and sequence ${compare} $2 order by sequence ${order} limit 1) s
       join lateral (select idx from reading where step_id = s.id order by idx ${order} limit 1) r on true`,
    [campaignId, sequence],
  );
  return there ?? null;
}

/** The next repeat that carries a flag, in this phase or in the first later one whose summary counts any. */
async function findNextFlagged({ campaignId, stepId, sequence, index, fitRunId }: Where & { fitRunId: string }): Promise<Place | null> {
  const here = await row<{ index: number }>(`select idx as index from fit where fit_run_id = $1 and step_id = $2 and idx > $3 and flags <> 0 order by idx limit 1`, [fitRunId, stepId, index]);
  if (here) return { sequence, index: here.index };
  const there = await row<Place>(
    `select s.sequence, f.idx as index
       from (select p.step_id, p.sequence from phase p join phase_summary m on m.phase_id = p.id and m.fit_run_id = $2
              where p.campaign_id = $1 and p.sequence > $3 and m.flag_counts <> '{}' order by p.sequence limit 1) s
       join lateral (select idx from fit where fit_run_id = $2 and step_id = s.step_id and flags <> 0 order by idx limit 1) f on true`,
    [campaignId, fitRunId, sequence],
  );
  return there ?? null;
}

function shownOf({ n, idx, f0Hz, leftOut }: PhaseColumns, index: number): SweepPlace["values"] {
  const group = Math.max(1, Math.ceil((2 * n) / MOST_SHOWN));
  const kept = new Set<number>();
  for (let from = 0; from < n; from += group) {
    let [low, high] = [from, from];
    for (let i = from; i < Math.min(n, from + group); i++) {
      if (!(f0Hz[i] >= f0Hz[low])) low = i;
      if (!(f0Hz[i] <= f0Hz[high])) high = i;
      if (idx[i] === index) kept.add(i);
    }
    kept.add(low).add(high);
  }
  return [...kept].sort((a, b) => a - b).flatMap((i) => (Number.isFinite(f0Hz[i]) ? [{ index: idx[i], f0Hz: f0Hz[i], leftOut: leftOut[i] === 1 }] : []));
}
