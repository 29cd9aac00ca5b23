import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { columnsOf, decodePart, partSql, type Repeat, type RepeatsOf } from "@/lib/phases/columns";
import { valuesOf, type Quantity } from "@/lib/phases/levels";
import { markLeftOut } from "@/lib/phases/summarise";

/** Repeats asked for in one query: some megabytes, so that neither memory nor the event loop feels how many there are in all. */
const REPEATS_AT_ONCE = 200_000;

type Load = { fitRunId: string; quantity: Quantity };

/** One quantity of the repeats of phases, phase by phase in their order: closed ones from their compact columns, the one under way from its rows. */
export async function* loadRepeats(phases: readonly SelectedPhase[], load: Load): AsyncGenerator<{ phase: SelectedPhase; repeats: RepeatsOf }> {
  for (const batch of inBatches(phases)) {
    const closed = await loadClosed(batch, load);
    for (const phase of batch) {
      const repeats = closed.get(phase.phaseId) ?? (phase.closed ? undefined : await readOpenPhase(phase, load));
      if (repeats) yield { phase, repeats };
    }
  }
}

function inBatches(phases: readonly SelectedPhase[]): SelectedPhase[][] {
  const batches: SelectedPhase[][] = [];
  let room = 0;
  for (const phase of phases) {
    const n = phase.n ?? 0;
    if (batches.length === 0 || n > room) {
      batches.push([]);
      room = REPEATS_AT_ONCE;
    }
    batches[batches.length - 1].push(phase);
    room -= n;
  }
  return batches;
}

async function loadClosed(phases: readonly SelectedPhase[], { fitRunId, quantity }: Load): Promise<Map<string, RepeatsOf>> {
  const closed = phases.filter((phase) => phase.closed).map(({ phaseId }) => phaseId);
  if (closed.length === 0) return new Map();
  const stored = await rows<{ phaseId: string; part: Buffer }>(
    `select phase_id as "phaseId", ${partSql(quantity)} as part from phase_summary where fit_run_id = $1 and phase_id = any($2)`,
    [fitRunId, closed],
  );
  return new Map(stored.map(({ phaseId, part }) => [phaseId, decodePart(part)]));
}

async function readOpenPhase({ stepId, discard }: SelectedPhase, { fitRunId, quantity }: Load): Promise<RepeatsOf> {
  const readings = await rows<Repeat & { excluded: boolean }>(
    `select r.idx, r.at, f.f0_hz as "f0Hz", f.q, f.f0_std_hz as "f0StdHz", r.temperature_c as "temperatureC", f.flags,
            exists (select 1 from exclusion e where e.step_id = r.step_id and e.idx = r.idx and e.undone_at is null) as excluded
       from reading r cross join lateral (select * from fit where fit_run_id = $2 and step_id = $1 and idx = r.idx offset 0) f
      where r.step_id = $1 order by r.idx`,
    [stepId, fitRunId],
  );
  const columns = columnsOf(readings);
  markLeftOut(columns, { discard, excluded: new Set(readings.filter(({ excluded }) => excluded).map(({ idx }) => idx)) });
  return { n: columns.n, at: columns.at, leftOut: columns.leftOut, values: valuesOf(columns, quantity) };
}
