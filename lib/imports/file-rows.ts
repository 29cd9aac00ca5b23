import { row } from "@/lib/db";
import { checkWorkbook } from "@/lib/imports/check-workbook";
import type { CsvRow } from "@/lib/imports/csv-splitter";
import { refuse } from "@/lib/imports/refusal";
import type { Format } from "@/lib/imports/schema";
import { isWorkbook } from "@/lib/imports/sniff";
import { textRows } from "@/lib/imports/text-rows";
import { MOST_WORKBOOK_BYTES, workbookRows } from "@/lib/imports/workbook-rows";

/** The pieces of a stored file in order. `onRead` is told how many bytes have been read. */
async function* chunks(importRunId: string, onRead?: (bytes: number) => void): AsyncGenerator<Uint8Array> {
  let read = 0;
  for (let n = 0; ; n++) {
    const chunk = await row<{ bytes: Buffer }>(`select bytes from import_chunk where import_run_id = $1 and n = $2`, [importRunId, n]);
    if (!chunk) return;
    read += chunk.bytes.length;
    onRead?.(read);
    // A megabyte of rows is split and read in pieces, so that nobody waits long for this process.
    for (let from = 0; from < chunk.bytes.length; from += PIECE) {
      yield chunk.bytes.subarray(from, from + PIECE);
      await new Promise(setImmediate);
    }
  }
}

const PIECE = 64 * 1024;
const BATCH = 500;

/** Rows of a stored file, text or workbook, in batches. @throws Refusal for what cannot be read. */
export async function* fileRows({ importRunId, sizeBytes, format, onRead }: { importRunId: string; sizeBytes: number; format: Format; onRead?: (bytes: number) => void }): AsyncGenerator<CsvRow[]> {
  const first = await row<{ bytes: Buffer }>(`select substring(bytes for 4) as bytes from import_chunk where import_run_id = $1 and n = 0`, [importRunId]);
  try {
    if (!first || !isWorkbook(first.bytes)) return yield* textRows(chunks(importRunId, onRead), format);
    if (sizeBytes > MOST_WORKBOOK_BYTES) throw new RangeError(`a workbook may have ${MOST_WORKBOOK_BYTES / 1024 / 1024} MiB; save the sheet as CSV`);
    const parts: Uint8Array[] = [];
    for await (const part of chunks(importRunId, onRead)) parts.push(part);
    const bytes = Buffer.concat(parts);
    checkWorkbook(bytes);
    const rows = await workbookRows(bytes);
    for (let from = 0; from < rows.length; from += BATCH) {
      yield rows.slice(from, from + BATCH);
      await new Promise(setImmediate);
    }
  } catch (error) {
    if (error instanceof RangeError) throw refuse(`The file cannot be read: ${error.message}.`, [{ path: "file", message: error.message }]);
    throw error;
  }
}
