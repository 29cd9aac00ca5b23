import { randomBytes } from "node:crypto";
import { row } from "@/lib/db";
import { ImportRun } from "@/models/import-run";
import { now } from "./now";
import { buildPerson } from "./person";

/** An import that waits for a worker. */
export async function buildImportRun(given: Partial<ImportRun> = {}): Promise<ImportRun> {
  const reserved = await row<{ id: string }>(`select nextval(pg_get_serial_sequence('campaign', 'id')) as id`);
  return ImportRun.create({
    name: "Readings of 2019",
    fileName: "wr-2204-2019.csv",
    sizeBytes: "61234567",
    sha256: randomBytes(32),
    mapping: {},
    format: {},
    state: "waiting",
    reservedCampaignId: reserved?.id ?? null,
    createdBy: given.createdBy ?? (await buildPerson({ role: "researcher" })).id,
    createdAt: now,
    ...given,
  });
}
