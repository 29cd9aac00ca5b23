import type { Transaction } from "sequelize";
import { rows } from "@/lib/db";

/** Gaps in the stored readings of a step as inclusive ranges, in order; empty when all are there. */
export async function missingRanges(transaction: Transaction, stepId: string, repeats: number): Promise<[number, number][]> {
  const gaps = await rows<{ from: number; to: number }>(
    `select before + 1 as "from", idx - 1 as "to"
       from (select idx, lag(idx, 1, -1) over (order by idx) as before
               from (select idx from reading where step_id = $1 union all select $2::int) stored) gap
      where idx - before > 1
      order by 1`,
    [stepId, repeats],
    transaction,
  );
  return gaps.map(({ from, to }) => [from, to]);
}

/** Ranges in words, cut after a few: "3, 7–12 and 4 more". */
export function rangesInWords(ranges: readonly [number, number][], most = 8): string {
  const words = ranges.slice(0, most).map(([from, to]) => (from === to ? `${from}` : `${from}–${to}`));
  const rest = ranges.slice(most).reduce((sum, [from, to]) => sum + to - from + 1, 0);
  return rest > 0 ? `${words.join(", ")} and ${rest} more` : words.join(", ");
}
