import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { decodeMarks, marksSql } from "@/lib/phases/columns";

/** Why repeats of a phase might not count, oldest first, as many as `loadRepeats` gives of it. */
export type Marks = { flags: Uint16Array; discarded: Uint8Array; excluded: Uint8Array };

/** Phases asked for in one query. */
const AT_ONCE = 500;

/** Flags, discards and people's exclusions of the repeats of phases: closed ones from their compact columns, the one under way from its rows. */
export async function loadMarks(phases: readonly SelectedPhase[], fitRunId: string): Promise<Map<string, Marks>> {
  const found = new Map<string, Marks>();
  for (let from = 0; from < phases.length; from += AT_ONCE) {
    const some = phases.slice(from, from + AT_ONCE);
    const [excluded, stored] = await Promise.all([
      rows<{ stepId: string; idx: number }>(`select step_id as "stepId", idx from exclusion where undone_at is null and step_id = any($1)`, [some.map(({ stepId }) => stepId)]),
      rows<{ phaseId: string; marks: Buffer }>(`select phase_id as "phaseId", ${marksSql} as marks from phase_summary where fit_run_id = $1 and phase_id = any($2)`, [
        fitRunId,
        some.filter(({ closed }) => closed).map(({ phaseId }) => phaseId),
      ]),
    ]);
    const outOf = new Map<string, Set<number>>();
    for (const { stepId, idx } of excluded) outOf.set(stepId, (outOf.get(stepId) ?? new Set()).add(idx));
    const marksOf = new Map(stored.map(({ phaseId, marks }) => [phaseId, decodeMarks(marks)]));
    for (const phase of some) {
      const { idx, flags } = marksOf.get(phase.phaseId) ?? (await openMarks(phase, fitRunId));
      const out = outOf.get(phase.stepId);
      found.set(phase.phaseId, { flags, discarded: marked(idx, phase.discard > 0 && ((one) => one < phase.discard)), excluded: marked(idx, out !== undefined && ((one) => out.has(one))) });
    }
  }
  return found;
}

/** 1 where it holds; most phases have nothing to mark, and are not gone through. */
function marked(idx: Int32Array, holds: ((one: number) => boolean) | false): Uint8Array {
  const marks = new Uint8Array(idx.length);
  if (holds) for (let i = 0; i < idx.length; i++) marks[i] = holds(idx[i]) ? 1 : 0;
  return marks;
}

async function openMarks({ stepId }: SelectedPhase, fitRunId: string): Promise<{ idx: Int32Array; flags: Uint16Array }> {
  const fits = await rows<{ idx: number; flags: number }>(
    `select r.idx, f.flags from reading r cross join lateral (select * from fit where fit_run_id = $2 and step_id = $1 and idx = r.idx offset 0) f where r.step_id = $1 order by r.idx`,
    [stepId, fitRunId],
  );
  return { idx: Int32Array.from(fits, ({ idx }) => idx), flags: Uint16Array.from(fits, ({ flags }) => flags) };
}
