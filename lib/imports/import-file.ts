import type { Transaction } from "sequelize";
import { Keys } from "@/lib/imports/keys";
import { readFile, type StoredFile } from "@/lib/imports/read-file";
import { refuse, RowErrors } from "@/lib/imports/refusal";
import { orderByTime, splitPhases, type PhaseRows } from "@/lib/imports/split-phases";
import { writeCampaign, type CampaignToWrite } from "@/lib/imports/write-campaign";
import { ReadingsWriter, type Place } from "@/lib/imports/write-readings";
import { IMPORTED_AIR_REFERENCES, updateBaseline } from "@/lib/phases/baseline";
import { closeMeasured } from "@/lib/phases/close-phase";

export type Progress = { rowsRead: number; rowsStored: number; phases: number; readBytes: number };

export type ToImport = {
  file: StoredFile;
  campaign: Pick<CampaignToWrite, "campaignId" | "name" | "sensorId" | "readout" | "fileName" | "by">;
  /** More are left for a job. */
  mostRows?: number;
  now: Date;
  /** Whatever it throws ends the import. */
  onProgress: (progress: Progress) => Promise<void>;
};

export type Imported = { readings: number; phases: number; rows: number; ignored: string[] };

/** A phase costs a few milliseconds to close: a cycle column that counts rows must not keep a worker for hours. */
const MOST_PHASES = 20_000;

/**
 * Imports a stored file as a finished campaign, all of it or nothing. It is gone through twice: to find the phases, then to check every
 * row and to write what was read; so memory holds a few numbers of each reading and never the file. Once a row is wrong nothing more
 * is written, but all rows are checked.
 *
 * @returns undefined when it has more than `mostRows` rows; nothing was written then.
 * @throws Refusal with what is wrong, by line.
 */
export async function importFile(transaction: Transaction, { file, campaign, mostRows = Infinity, now, onProgress }: ToImport): Promise<Imported | undefined> {
  const errors = new RowErrors();
  const keys = new Keys();
  const progress: Progress = { rowsRead: 0, rowsStored: 0, phases: 0, readBytes: 0 };
  const tell = (news: Partial<Progress>) => onProgress(Object.assign(progress, news));
  const onBatch = (rowsRead: number, readBytes: number) => tell({ rowsRead, readBytes });
  const { rows, ignored } = await readFile({ file, now, keysOnly: true, errors, onItem: (item) => keys.add(item), onBatch });
  if (errors.count > 0) await demandNoErrors({ file, now, onBatch });
  if (rows > mostRows) return undefined;

  const columns = keys.columns();
  const order = orderByTime(columns.at);
  const phases = splitPhases(columns, order);
  if (phases.length > MOST_PHASES) throw refuse(`The rows make ${phases.length} phases, of which a campaign may have ${MOST_PHASES}; does the cycle or the medium change from row to row?`, [{ path: "cycle", message: `makes ${phases.length} phases` }]);
  const { fitRunId, stepIds } = await writeCampaign(transaction, { ...campaign, media: keys.media, phases, keys: columns, order, now });
  const writer = new ReadingsWriter(transaction, { fitRunId, stepIds, repeats: phases.map(({ from, to }) => to - from), readout: campaign.readout, now });
  const place = placesOf(phases, order);
  let item = 0;
  await readFile({
    file,
    now,
    errors,
    onItem: (one) => {
      if (errors.count === 0) writer.add(one, place(item++));
    },
    onBatch: async () => {
      if (errors.count > 0 || !writer.isFull) return;
      await writer.write();
      await tell({ rowsStored: Math.round((writer.added / keys.n) * rows) });
    },
  });
  errors.demandNone();
  await writer.end();

  const references = new Map<number | null, number>();
  for (const [i, stepId] of stepIds.entries()) {
    const { sum, n } = writer.pressures[i];
    const closed = await closeMeasured(transaction, { stepId, measured: { columns: writer.columns[i], pressurePa: n > 0 ? sum / n : null }, now });
    const before = closed && references.get(closed.setPointC);
    if (closed?.role === "reference" && (before ?? 0) < IMPORTED_AIR_REFERENCES) {
      const { mountId, setPointC, readout } = closed;
      const baseline = await updateBaseline(transaction, { campaignId: campaign.campaignId, mountId, setPointC, readout, fitRunId }, { airReferences: IMPORTED_AIR_REFERENCES, now });
      references.set(setPointC, baseline?.n ?? 0);
    }
    await tell({ rowsStored: rows, phases: i + 1 });
  }
  return { readings: keys.n, phases: phases.length, rows, ignored };
}

/** @throws Refusal with everything that is wrong with the rows. */
async function demandNoErrors(reading: Pick<Parameters<typeof readFile>[0], "file" | "now" | "onBatch">): Promise<void> {
  const errors = new RowErrors();
  await readFile({ ...reading, errors, onItem: () => undefined });
  errors.demandNone();
}

/** By the place of a reading in the file: its phase, and the repeat in it. */
function placesOf(phases: readonly PhaseRows[], order: Uint32Array): (item: number) => Place {
  const phaseOf = new Uint32Array(order.length);
  const idxOf = new Uint32Array(order.length);
  phases.forEach(({ from, to }, phase) => {
    for (let i = from; i < to; i++) {
      phaseOf[order[i]] = phase;
      idxOf[order[i]] = i - from;
    }
  });
  return (item) => ({ phase: phaseOf[item], idx: idxOf[item] });
}
