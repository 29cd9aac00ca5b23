import { Assembler } from "@/lib/imports/assemble";
import { columnsOf, type ColumnError, type Layout } from "@/lib/imports/columns-of";
import type { CsvRow } from "@/lib/imports/csv-splitter";
import { HeadReader } from "@/lib/imports/read-head";
import { PLACE, RowReader, type RowError } from "@/lib/imports/row-reader";
import type { Format, Mapping } from "@/lib/imports/schema";
import { isWorkbook } from "@/lib/imports/sniff";
import { textRows } from "@/lib/imports/text-rows";
import { workbookRows } from "@/lib/imports/workbook-rows";

const HEAD_BYTES = 512 * 1024;
const MOST_ROWS = 200;

/** The first rows of a file as they stand in it. `whole`: there are no others. */
export type Beginning = { header: CsvRow; rows: CsvRow[]; whole: boolean };

/** Reads the beginning of a file, in the browser, before it is sent. @throws RangeError for what cannot be read, or has no header. */
export async function readBeginning(file: Blob, format: Pick<Format, "delimiter" | "encoding" | "headerLine" | "firstLine">): Promise<Beginning> {
  const first = new Uint8Array(await file.slice(0, 4).arrayBuffer());
  const head = new HeadReader(format);
  const rows: CsvRow[] = [];
  let cut = false;
  const take = (batch: readonly CsvRow[]) => {
    for (const row of batch) {
      if (!head.isData(row)) continue;
      if (rows.length < MOST_ROWS) rows.push(row);
      else cut = true;
    }
  };
  if (isWorkbook(first)) take(await workbookRows(new Uint8Array(await file.arrayBuffer())));
  else {
    const part = file.slice(0, HEAD_BYTES);
    for await (const batch of textRows(bytesOf(part), format)) take(batch);
    if (part.size < file.size) {
      // The last row may have been cut through.
      if (!cut) rows.pop();
      cut = true;
    }
  }
  if (!head.header) throw new RangeError("it has no line with the names of columns");
  return { header: head.header, rows, whole: !cut };
}

async function* bytesOf(part: Blob): AsyncGenerator<Uint8Array> {
  yield new Uint8Array(await part.arrayBuffer());
}

export type PreviewRow = { line: number; at: string; medium: string; cycle: number | null; f0Hz: number | null; q: number | null; temperatureC: number | null; points: number | null };

export type Preview = { layout?: Layout; rows: PreviewRow[]; errors: (RowError | ColumnError)[]; ignored: string[] };

/** How an import would read these rows: the very code that does it, on the first of them. */
export function previewOf({ header, rows }: Beginning, { mapping, format, now }: { mapping: Mapping; format: Format; now: Date }): Preview {
  const columns = columnsOf(header.cells, mapping, format);
  if ("errors" in columns) return { rows: [], errors: columns.errors, ignored: [] };
  const read: PreviewRow[] = [];
  const errors: RowError[] = [];
  const assembler = new Assembler(new RowReader(columns, format, { now }), format.decimal, {
    item: ({ line, at, medium, numbers, record }) => {
      const given = (place: number) => (Number.isNaN(numbers[place]) ? null : numbers[place]);
      read.push({ line, at: new Date(at).toISOString(), medium, cycle: given(PLACE.cycle), f0Hz: given(PLACE.f0Hz), q: given(PLACE.q), temperatureC: given(PLACE.temperatureC), points: record?.().points ?? null });
    },
    error: (error) => errors.push(error),
  });
  for (const row of rows) assembler.push(row);
  // Of points the last sweep may be cut off by the end of what was read.
  if (columns.layout !== "points" || rows.length < MOST_ROWS) assembler.end();
  return { layout: columns.layout, rows: read, errors, ignored: columns.ignored };
}
