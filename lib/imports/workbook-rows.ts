import type { CellValue } from "read-excel-file/universal";
import { archiveEntries } from "@/lib/imports/archive-entries";
import type { CsvRow } from "@/lib/imports/csv-splitter";

/** Unpacked, a workbook takes many times its size: more than this is for a text file. */
export const MOST_UNPACKED_BYTES = 300 * 1024 * 1024;
export const TOO_LARGE = `the workbook unpacks to more than ${MOST_UNPACKED_BYTES / 1024 / 1024} MiB; save the sheet as CSV`;
export const MOST_WORKBOOK_BYTES = 64 * 1024 * 1024;

/**
 * Rows of the first sheet as text: numbers by their shortest text, dates as `2026-05-14 06:18:00.000` in no time zone, formulas by the
 * value that the sheet keeps of them.
 *
 * @throws RangeError for what is no workbook, or unpacks to more than 300 MiB.
 */
export async function workbookRows(bytes: Uint8Array): Promise<CsvRow[]> {
  if (bytes.length > MOST_WORKBOOK_BYTES) throw new RangeError(`a workbook may have ${MOST_WORKBOOK_BYTES / 1024 / 1024} MiB; save the sheet as CSV`);
  const unpacked = archiveEntries(bytes).reduce((sum, { unpacked: size }) => sum + size, 0);
  if (unpacked > MOST_UNPACKED_BYTES) throw new RangeError(TOO_LARGE);
  const { readSheet } = await import("read-excel-file/universal");
  const copy = new ArrayBuffer(bytes.length);
  new Uint8Array(copy).set(bytes);
  let rows: (CellValue | null)[][];
  try {
    rows = await readSheet(new Blob([copy]));
  } catch {
    throw new RangeError("this is no workbook that can be read; save the sheet as CSV");
  }
  return rows.map((cells, i) => ({ line: i + 1, cells: cells.map(textOf) })).filter(({ cells }) => cells.some((cell) => cell !== ""));
}

function textOf(cell: unknown): string {
  if (cell === null || cell === undefined) return "";
  if (cell instanceof Date) return Number.isNaN(cell.getTime()) ? "" : new Date(Math.round(cell.getTime())).toISOString().replace("T", " ").replace("Z", "");
  return String(cell);
}
