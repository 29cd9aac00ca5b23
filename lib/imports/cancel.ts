import { audit } from "@/lib/audit/record";
import { change, inTransaction, row } from "@/lib/db";
import { conflict, notFound } from "@/lib/errors";
import { getImport } from "@/lib/imports/read";
import { lockImport } from "@/lib/imports/run";
import type { ImportRunAnswer } from "@/lib/imports/schema";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";

/** Ends an import that waits or runs: at once, or as soon as the worker at it looks up. Nothing of it stays. @throws AppError 403, 404, 409. */
export async function cancelImport({ by, importRunId, now }: { by: Actor; importRunId: string; now: Date }): Promise<ImportRunAnswer> {
  demand(by, "edit campaigns");
  await inTransaction(async (transaction) => {
    const nobodyAtIt = await lockImport(transaction, importRunId);
    const run = await row<{ state: string; cancelWanted: boolean }>(
      `select state, cancel_wanted as "cancelWanted" from import_run where id = $1 and state <> 'receiving' for no key update`,
      [importRunId],
      transaction,
    );
    if (!run) throw notFound("import");
    if (run.state === "cancelled" || run.cancelWanted) return;
    if (run.state === "done" || run.state === "refused") throw conflict(run.state === "done" ? "It has been imported already" : "It was refused already");
    await change(
      nobodyAtIt ? `update import_run set state = 'cancelled', cancel_wanted = true, ended_at = $2 where id = $1` : `update import_run set cancel_wanted = true where id = $1 and $2::timestamptz is not null`,
      [importRunId, now],
      transaction,
    );
    if (nobodyAtIt) await change(`delete from import_chunk where import_run_id = $1`, [importRunId], transaction);
    await audit(transaction, { by, now, action: "cancel", entity: "importRun", entityId: importRunId });
    await notify("changed:imports", transaction);
  });
  return getImport({ importRunId, now });
}
