import { CsvSplitter, type CsvRow } from "@/lib/imports/csv-splitter";
import { sniffDelimiter, sniffEncoding, sniffLineEnd } from "@/lib/imports/sniff";
import type { Format } from "@/lib/imports/schema";

/** What the first bytes must hold to tell how the text is written. */
const HEAD_BYTES = 65_536;

/** Rows of a text file in batches, as its bytes come. @throws RangeError for bytes that are no text in the encoding, or a row without end. */
export async function* textRows(chunks: AsyncIterable<Uint8Array>, format: Pick<Format, "delimiter" | "encoding" | "headerLine">): AsyncGenerator<CsvRow[]> {
  let head: Uint8Array[] = [];
  let reader: { decoder: TextDecoder; encoding: string; splitter: CsvSplitter } | undefined;
  const begin = (whole: boolean) => {
    const bytes = concat(head);
    const encoding = format.encoding ?? sniffEncoding(bytes, whole);
    const text = new TextDecoder(encoding).decode(bytes);
    const decoder = new TextDecoder(encoding, { fatal: true });
    reader = { decoder, encoding, splitter: new CsvSplitter(format.delimiter ?? sniffDelimiter(text, format.headerLine), sniffLineEnd(text)) };
    head = [];
    return { reader, bytes };
  };
  for await (const chunk of chunks) {
    if (reader) {
      yield split(reader, chunk);
      continue;
    }
    head.push(chunk);
    if (head.reduce((sum, { length }) => sum + length, 0) < HEAD_BYTES) continue;
    const begun = begin(false);
    yield split(begun.reader, begun.bytes);
  }
  if (!reader) {
    const begun = begin(true);
    yield split(begun.reader, begun.bytes);
    reader = begun.reader;
  }
  yield [...split(reader, new Uint8Array(), true), ...reader.splitter.end()];
}

function split({ decoder, encoding, splitter }: { decoder: TextDecoder; encoding: string; splitter: CsvSplitter }, bytes: Uint8Array, last = false): CsvRow[] {
  let text: string;
  try {
    text = decoder.decode(bytes, { stream: !last });
  } catch {
    throw new RangeError(`behind line ${splitter.linesRead} there are bytes that are no ${encoding}; choose another encoding`);
  }
  if (text.includes("\0")) throw new RangeError(`behind line ${splitter.linesRead} there are NUL characters; this is no text file`);
  return splitter.push(text);
}

function concat(parts: readonly Uint8Array[]): Uint8Array {
  const all = new Uint8Array(parts.reduce((sum, { length }) => sum + length, 0));
  let at = 0;
  for (const part of parts) {
    all.set(part, at);
    at += part.length;
  }
  return all;
}
