import { UniqueConstraintError } from "sequelize";
import { audit } from "@/lib/audit/record";
import { change, inTransaction, row } from "@/lib/db";
import { impossible } from "@/lib/errors";
import { Answer } from "@/lib/http/respond";
import { dropReceived, type Received } from "@/lib/imports/receive";
import { asAppError } from "@/lib/imports/refusal";
import { runImport } from "@/lib/imports/run";
import type { ImportAnswer } from "@/lib/imports/schema";
import { notify } from "@/lib/notify";
import { demand, type Actor } from "@/lib/people/actor";

/** Up to so many rows are imported while the caller waits. */
export const ROWS_AT_ONCE = 50_000;
/** Text with few lines may still be long: sweeps, one a line. */
const BYTES_AT_ONCE = 16 * 1024 * 1024;

type Accept = { by: Actor; received: Received; now: Date };

/**
 * Imports a received file: at once when it is small, else by a worker. A file that was imported, or is being imported, is recognised by
 * its content, whatever its name.
 *
 * @throws AppError 422 with what is wrong, by line; nothing was imported then.
 */
export async function acceptImport({ by, received, now }: Accept): Promise<Answer<ImportAnswer>> {
  demand(by, "edit campaigns");
  const { importRunId } = received;
  try {
    const known = (await findKnown(received.sha256)) ?? (await queue({ by, received, now }));
    if (known) return known;
  } finally {
    await dropReceived(importRunId);
  }
  if (received.lines <= ROWS_AT_ONCE + 1001 && received.sizeBytes <= BYTES_AT_ONCE) {
    const outcome = await runImport({ importRunId, mostRows: ROWS_AT_ONCE, now });
    if (outcome.state === "refused") throw asAppError(outcome.problem);
    if (outcome.state === "done") {
      const { campaignId, readings, ignored } = outcome;
      return new Answer(201, { campaignId, imported: readings, ...(ignored.length > 0 ? { ignored } : {}) });
    }
  }
  await notify("imports");
  return working(importRunId);
}

type Known = { id: string; state: "waiting" | "running" | "done"; campaignId: string };

async function findKnown(sha256: Buffer): Promise<Answer<ImportAnswer> | undefined> {
  const known = await row<Known>(
    `select id, state, reserved_campaign_id as "campaignId" from import_run where sha256 = $1 and state in ('waiting', 'running', 'done')`,
    [sha256],
  );
  if (!known) return undefined;
  if (known.state === "done") return new Answer(200, { campaignId: known.campaignId, imported: 0, alreadyImported: true });
  return new Answer(202, { importRunId: known.id, campaignId: known.campaignId });
}

/** Makes it an import that waits; what is known already when another call with the same file was quicker. */
async function queue({ by, received: { importRunId, fileName, sizeBytes, sha256, fields }, now }: Accept): Promise<Answer<ImportAnswer> | undefined> {
  const { name, sensorId, mapping, format } = fields;
  try {
    await inTransaction(async (transaction) => {
      if (sensorId && !(await row(`select id from sensor where id = $1`, [sensorId], transaction))) {
        throw impossible("There is no such sensor", { errors: [{ path: "sensorId", message: "There is no such sensor" }] });
      }
      await change(
        `update import_run set state = 'waiting', name = $2, sensor_id = $3, mapping = $4, format = $5, sha256 = $6, size_bytes = $7,
                reserved_campaign_id = nextval(pg_get_serial_sequence('campaign', 'id')) where id = $1`,
        [importRunId, name, sensorId ?? null, JSON.stringify(mapping), JSON.stringify(format), sha256, sizeBytes],
        transaction,
      );
      await audit(transaction, { by, now, action: "receive", entity: "importRun", entityId: importRunId, detail: { name, fileName, sizeBytes } });
      await notify("changed:imports", transaction);
    });
    return undefined;
  } catch (error) {
    if (error instanceof UniqueConstraintError) return findKnown(sha256);
    throw error;
  }
}

async function working(importRunId: string): Promise<Answer<ImportAnswer>> {
  const run = await row<{ campaignId: string }>(`select reserved_campaign_id as "campaignId" from import_run where id = $1`, [importRunId]);
  return new Answer(202, { importRunId, campaignId: run?.campaignId ?? "" });
}
