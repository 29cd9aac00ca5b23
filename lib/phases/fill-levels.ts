import { inTransaction, row, rows } from "@/lib/db";
import { decodeColumns } from "@/lib/phases/columns";
import { writeLevels } from "@/lib/phases/write-levels";

const AT_ONCE = 200;

/** Makes the levels of phases that a version without them has closed, some at a time; the others are read from their columns meanwhile. */
export async function fillLevels(): Promise<void> {
  const unfilled = await rows<{ phaseId: string; fitRunId: string }>(
    `select phase_id as "phaseId", fit_run_id as "fitRunId" from phase_summary where digest is null order by phase_id desc limit ${AT_ONCE}`,
  );
  for (const summary of unfilled) {
    await inTransaction(async (transaction) => {
      const found = await row<{ columns: Buffer }>(
        `select columns from phase_summary where phase_id = $1 and fit_run_id = $2 and digest is null for no key update`,
        [summary.phaseId, summary.fitRunId],
        transaction,
      );
      if (found) await writeLevels(transaction, summary, decodeColumns(found.columns));
    });
  }
}
