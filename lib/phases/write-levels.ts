import type { Transaction } from "sequelize";
import { change } from "@/lib/db";
import { encodeBuckets, merge } from "@/lib/phases/buckets";
import { digestOf, type PhaseColumns } from "@/lib/phases/columns";
import { courseOf, keptOf, partsStored, QUANTITIES, valuesOf } from "@/lib/phases/levels";

/** Stores what plots read of a phase instead of its columns. The summary is there already; a phase summarised anew overwrites what was. */
export async function writeLevels(transaction: Transaction, { phaseId, fitRunId }: { phaseId: string; fitRunId: string }, columns: PhaseColumns): Promise<void> {
  const { n, at, leftOut } = columns;
  const levels = QUANTITIES.flatMap((quantity) => {
    const kept = keptOf({ at, leftOut, values: valuesOf(columns, quantity) });
    return partsStored(n).map((parts) => ({ quantity, parts, buckets: encodeBuckets(merge(kept, parts)) }));
  });
  const earliest = at.reduce((least, time) => Math.min(least, time), Infinity);
  const latest = at.reduce((most, time) => Math.max(most, time), -Infinity);
  await change(
    `with summary as (
       update phase_summary set digest = $3, earliest_at = $4, latest_at = $5, course = $6 where phase_id = $1 and fit_run_id = $2
     )
     insert into phase_level (fit_run_id, phase_id, quantity, parts, buckets)
     select $2, $1, * from unnest($7::text[], $8::int[], $9::bytea[])
     on conflict (fit_run_id, quantity, parts, phase_id) do update set buckets = excluded.buckets`,
    [
      phaseId,
      fitRunId,
      digestOf(columns),
      n > 0 ? new Date(earliest) : null,
      n > 0 ? new Date(latest) : null,
      courseOf(columns.f0Hz),
      levels.map(({ quantity }) => quantity),
      levels.map(({ parts }) => parts),
      levels.map(({ buckets }) => buckets),
    ],
    transaction,
  );
}
