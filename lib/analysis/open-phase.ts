import type { SelectedPhase } from "@/lib/analysis/select-phases";
import { rows } from "@/lib/db";
import { LEFT_OUT } from "@/lib/numerics/resonance/flags";
import type { Buckets } from "@/lib/phases/buckets";
import type { Quantity } from "@/lib/phases/levels";

type Load = { fitRunId: string; quantity: Quantity; parts: number; from?: Date; to?: Date };

type Part = { from: number | null; to: number | null; min: number | null; max: number | null; mean: number | null; count: number; n: number };

const COLUMN: Record<Quantity, string> = { f0: "f.f0_hz", q: "f.q", temperature: "r.temperature_c" };

/**
 * The fitted repeats of a phase under way within a window of time, in at most so many parts of equally many indices. They are
 * put together in the database: such a phase may be weeks long, and its plot is asked for every few seconds.
 */
export async function loadOpenPhase({ stepId, discard }: SelectedPhase, { fitRunId, quantity, parts, from, to }: Load): Promise<{ buckets: Buckets; leftOut: number }> {
  const found = await rows<Part>(
    `with inside as (
       select idx, at, temperature_c from reading where step_id = $1 and ($5::timestamptz is null or at >= $5) and ($6::timestamptz is null or at <= $6)),
     ends as (select min(idx) as first, max(idx) as last from inside),
     marked as (
       select width_bucket(r.idx, ends.first, ends.last + 1, $4) as part, floor(extract(epoch from r.at) * 1000)::float8 as ms, ${COLUMN[quantity]} as value,
              f.f0_hz is not null and ${COLUMN[quantity]} is not null and r.idx >= $3 and f.flags & ${LEFT_OUT} = 0
                and not exists (select 1 from exclusion e where e.step_id = $1 and e.idx = r.idx and e.undone_at is null) as counts
         from ends, inside r cross join lateral (select f0_hz, q, flags from fit where fit_run_id = $2 and step_id = $1 and idx = r.idx offset 0) f)
     select min(ms) filter (where counts) as "from", max(ms) filter (where counts) as "to", min(value) filter (where counts), max(value) filter (where counts),
            avg(value) filter (where counts) as mean, (count(*) filter (where counts))::int as count, count(*)::int as n
       from marked group by part order by part`,
    [stepId, fitRunId, discard, parts, from ?? null, to ?? null],
  );
  const kept = found.filter(({ count }) => count > 0);
  const column = (name: keyof Part) => Float64Array.from(kept, (part) => part[name] as number);
  return {
    buckets: { from: column("from"), to: column("to"), min: column("min"), max: column("max"), mean: column("mean"), count: column("count") },
    leftOut: found.reduce((sum, { n, count }) => sum + n - count, 0),
  };
}
