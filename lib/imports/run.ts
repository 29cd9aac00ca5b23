import type { Transaction } from "sequelize";
import { change, inTransaction, row, rows } from "@/lib/db";
import { importFile, type Imported, type Progress } from "@/lib/imports/import-file";
import { Refusal } from "@/lib/imports/refusal";
import type { Format, Mapping } from "@/lib/imports/schema";
import { notify } from "@/lib/notify";
import type { Role } from "@/lib/permissions";
import type { ImportProblem } from "@/models/json";

type Run = {
  id: string;
  name: string;
  sensorId: string | null;
  sensorReadout: "velocity" | "displacement" | null;
  fileName: string;
  sizeBytes: string;
  mapping: Mapping;
  format: Format;
  campaignId: string;
  personId: string;
  person: string;
  role: Role;
  cancelWanted: boolean;
};

export type Outcome =
  | ({ state: "done"; campaignId: string } & Imported)
  | { state: "refused"; problem: ImportProblem }
  | { state: "cancelled" }
  /** It has more rows than were allowed here, or another process is at it. */
  | { state: "waiting" };

class Cancelled extends Error {}
/** The process ends: what it did is rolled back, and another begins anew. */
class Interrupted extends Error {}

/** Of `pg_try_advisory_xact_lock`, the other key being the run. */
const LOCK = 0x696d70;
const TELL_MS = 500;

const RUN = `
  select r.id, r.name, r.sensor_id as "sensorId", s.readout as "sensorReadout", r.file_name as "fileName", r.size_bytes as "sizeBytes", r.mapping, r.format,
         r.reserved_campaign_id as "campaignId", p.id as "personId", p.name as person, p.role, r.cancel_wanted as "cancelWanted"
    from import_run r join person p on p.id = r.created_by left join sensor s on s.id = r.sensor_id
   where r.id = $1 and r.state in ('waiting', 'running')`;

/**
 * Does an import that waits. Any number of processes may ask at once and after any crash: one does it, in a transaction of its own
 * that leaves either the whole campaign or nothing; how far it is stands in the run, told outside of that transaction.
 */
export async function runImport({ importRunId, mostRows, isEnding = () => false, now }: { importRunId: string; mostRows?: number; isEnding?: () => boolean; now: Date }): Promise<Outcome> {
  const began = performance.now();
  const later = () => new Date(now.getTime() + performance.now() - began);
  try {
    const imported = await inTransaction(async (transaction) => {
      const run = (await lockImport(transaction, importRunId)) ? await row<Run>(RUN, [importRunId], transaction) : undefined;
      if (!run) return undefined;
      if (run.cancelWanted) throw new Cancelled();
      await change(`update import_run set state = 'running', started_at = coalesce(started_at, $2) where id = $1`, [importRunId, now]);
      const { campaignId, name, sensorId, fileName, mapping, format } = run;
      const readout = format.readout ?? run.sensorReadout ?? "velocity";
      const done = await importFile(transaction, {
        file: { importRunId, sizeBytes: Number(run.sizeBytes), mapping, format },
        campaign: { campaignId, name, sensorId, readout, fileName, by: { id: run.personId, name: run.person, role: run.role } },
        mostRows,
        now,
        onProgress: teller(importRunId, isEnding),
      });
      if (!done) return undefined;
      await change(
        `update import_run set state = 'done', campaign_id = reserved_campaign_id, ended_at = $2, rows_read = $3, rows_stored = $3, phases = $4, read_bytes = size_bytes where id = $1`,
        [importRunId, later(), done.rows, done.phases],
        transaction,
      );
      await change(`delete from import_chunk where import_run_id = $1`, [importRunId], transaction);
      await notify("changed:imports", transaction);
      return { ...done, campaignId };
    });
    return imported ? { state: "done", ...imported } : { state: "waiting" };
  } catch (error) {
    if (error instanceof Cancelled) {
      await endImport({ importRunId, state: "cancelled", problem: null, now: later() });
      return { state: "cancelled" };
    }
    if (!(error instanceof Refusal)) throw error;
    await endImport({ importRunId, state: "refused", problem: error.problem, now: later() });
    return { state: "refused", problem: error.problem };
  }
}

/** Ends an import that brought nothing; the file is dropped. */
async function endImport({ importRunId, state, problem, now }: { importRunId: string; state: "refused" | "cancelled"; problem: ImportProblem | null; now: Date }): Promise<void> {
  await inTransaction(async (transaction) => {
    await change(`update import_run set state = $2, problem = $3, ended_at = $4 where id = $1`, [importRunId, state, problem && JSON.stringify(problem), now], transaction);
    await change(`delete from import_chunk where import_run_id = $1`, [importRunId], transaction);
    await notify("changed:imports", transaction);
  });
}

/** Whether nobody else is at this import; nobody will be until the transaction ends. */
export async function lockImport(transaction: Transaction, importRunId: string): Promise<boolean> {
  const lock = await row<{ held: boolean }>(`select pg_try_advisory_xact_lock(${LOCK}, ($1::bigint % 2147483647)::int) as held`, [importRunId], transaction);
  return lock?.held ?? false;
}

/** Writes how far an import is, twice a second at most, and learns whether somebody wants it ended. */
function teller(importRunId: string, isEnding: () => boolean): (progress: Progress) => Promise<void> {
  let toldAt = performance.now();
  return async ({ rowsRead, rowsStored, phases, readBytes }) => {
    if (performance.now() - toldAt < TELL_MS) return;
    toldAt = performance.now();
    const [run] = await rows<{ cancelWanted: boolean }>(
      `update import_run set rows_read = $2, rows_stored = $3, phases = $4, read_bytes = $5 where id = $1 returning cancel_wanted as "cancelWanted"`,
      [importRunId, rowsRead, rowsStored, phases, readBytes],
    );
    if (run?.cancelWanted) throw new Cancelled();
    if (isEnding()) throw new Interrupted(`import ${importRunId} was interrupted; it begins anew`);
  };
}

/** Imports that wait for a worker, the oldest first; one that a lost process had begun among them. */
export async function findWaitingImports(): Promise<string[]> {
  const found = await rows<{ id: string }>(`select id from import_run where state in ('waiting', 'running') order by id limit 100`);
  return found.map(({ id }) => id);
}
