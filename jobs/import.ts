import type { PgBoss } from "pg-boss";
import { send } from "@/jobs/queues";
import { findWaitingImports, runImport } from "@/lib/imports/run";

/** Puts every import that waits in the queue; one that is there already stays one job. */
export async function queueImports(boss: PgBoss): Promise<void> {
  for (const importRunId of await findWaitingImports()) await send(boss, "import", { importRunId }, { key: importRunId });
}

/** Imports a file. A worker that ends leaves it for the next one, which begins anew. */
export const makeImport = async ({ importRunId }: { importRunId: string }, { isEnding }: { isEnding: () => boolean }): Promise<void> => {
  await runImport({ importRunId, isEnding, now: new Date() });
};
