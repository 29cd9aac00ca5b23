import { once } from "node:events";
import { PassThrough } from "node:stream";
import ExcelJS from "exceljs";
import type { About, Table } from "@/lib/export/table";

/** Rows of a sheet, less the two of its head. */
const MOST_ROWS = 1_048_576 - 2;

/** Waits when more than this has not been fetched yet. */
const WAITING_BYTES = 1 << 20;

/**
 * A workbook with the table, what it is about, and what its columns mean, written while it is sent. Texts are texts: a cell that begins like a
 * formula is none. More rows than a sheet holds go on in the next.
 */
export function workbook(table: Table, about: About): AsyncIterable<Uint8Array> {
  const out = new PassThrough({ highWaterMark: WAITING_BYTES });
  write(table, about, out).catch((error: unknown) => out.destroy(error as Error));
  return out;
}

async function write({ name, columns, rows }: Table, about: About, out: PassThrough): Promise<void> {
  const book = new ExcelJS.stream.xlsx.WorkbookWriter({ stream: out, useSharedStrings: false, useStyles: true });
  const front = book.addWorksheet("about");
  front.columns = [{ width: 24 }, { width: 60 }];
  for (const [label, value] of about) front.addRow([label, value]).commit();
  front.addRow([]).commit();
  front.addRow(["Column", "Unit and meaning"]).commit();
  for (const { name: column, unit, what } of columns) front.addRow([column, unit === "" ? what : `${unit}: ${what}`]).commit();
  front.commit();

  const begin = (part: number) => {
    const sheet = book.addWorksheet(part === 1 ? name : `${name} ${part}`, { views: [{ state: "frozen", ySplit: 2 }] });
    sheet.columns = columns.map(({ name: column }) => ({ width: Math.max(10, column.length + 2) }));
    sheet.addRow(columns.map((column) => column.name)).commit();
    sheet.addRow(columns.map(({ unit }) => unit)).commit();
    return sheet;
  };
  let part = 1;
  let sheet = begin(part);
  let written = 0;
  for await (const batch of rows) {
    for (const row of batch) {
      if (written === MOST_ROWS) {
        sheet.commit();
        sheet = begin(++part);
        written = 0;
      }
      sheet.addRow([...row]).commit();
      written++;
    }
    if (out.destroyed) return;
    if (out.writableNeedDrain) await Promise.race([once(out, "drain"), once(out, "close")]);
  }
  sheet.commit();
  await book.commit();
}
