import { Assembler, type Item } from "@/lib/imports/assemble";
import { columnsOf } from "@/lib/imports/columns-of";
import { fileRows } from "@/lib/imports/file-rows";
import { HeadReader } from "@/lib/imports/read-head";
import { refuse, type RowErrors } from "@/lib/imports/refusal";
import { RowReader } from "@/lib/imports/row-reader";
import type { Format, Mapping } from "@/lib/imports/schema";

export type StoredFile = { importRunId: string; sizeBytes: number; mapping: Mapping; format: Format };

type Options = {
  file: StoredFile;
  now: Date;
  /** Only what decides about phases is read. */
  keysOnly?: boolean;
  errors: RowErrors;
  onItem: (item: Item) => void;
  /** After each batch of rows: how many rows and bytes so far. Whatever it throws ends the reading. */
  onBatch: (rows: number, bytes: number) => Promise<void>;
};

/** Goes once through a stored file, giving each reading as it is complete. Errors of rows are collected. @throws Refusal for what is wrong with the file as a whole. */
export async function readFile({ file, now, keysOnly, errors, onItem, onBatch }: Options): Promise<{ rows: number; ignored: string[] }> {
  const head = new HeadReader(file.format);
  let bytes = 0;
  let count = 0;
  let made: { assembler: Assembler; ignored: string[] } | undefined;
  for await (const batch of fileRows({ ...file, onRead: (read) => (bytes = read) })) {
    for (const row of batch) {
      if (!head.isData(row)) {
        if (row === head.header) made = begin(row.cells, { file, now, keysOnly, errors, onItem });
      } else {
        made?.assembler.push(row);
        count++;
      }
    }
    await onBatch(count, bytes);
  }
  if (!made) throw refuse("The file has no line with the names of columns.", [{ path: "file", message: "is empty" }]);
  made.assembler.end();
  await onBatch(count, bytes);
  if (count === 0) throw refuse("The file has no rows below the names of the columns.", [{ path: "file", message: "has no rows" }]);
  return { rows: count, ignored: made.ignored };
}

function begin(header: readonly string[], { file: { mapping, format }, now, keysOnly, errors, onItem }: Omit<Options, "onBatch">) {
  const columns = columnsOf(header, mapping, format);
  if ("errors" in columns) throw refuse(`${columns.errors.map(({ path, message }) => `${path}: ${message}`).join("; ")}.`, columns.errors);
  const reader = new RowReader(columns, format, { now, keysOnly });
  return { assembler: new Assembler(reader, format.decimal, { item: onItem, error: (error) => errors.add(error) }), ignored: columns.ignored };
}
