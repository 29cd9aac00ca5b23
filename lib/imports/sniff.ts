import type { Format } from "@/lib/imports/schema";

export type Delimiter = NonNullable<Format["delimiter"]>;
export type Encoding = NonNullable<Format["encoding"]>;

const DELIMITERS: readonly Delimiter[] = [",", ";", "\t", "|"];

/** How the text of a file is written, from its first bytes. A byte order mark decides; else what is no UTF-8 is taken for Windows-1252. */
export function sniffEncoding(head: Uint8Array, whole: boolean): Encoding {
  if (head[0] === 0xff && head[1] === 0xfe) return "utf-16le";
  if (head[0] === 0xfe && head[1] === 0xff) return "utf-16be";
  try {
    new TextDecoder("utf-8", { fatal: true }).decode(head, { stream: !whole });
    return "utf-8";
  } catch {
    return "windows-1252";
  }
}

/** Lines of CR alone are told by there being no LF. */
export const sniffLineEnd = (text: string): "\n" | "\r" => (!text.includes("\n") && text.includes("\r") ? "\r" : "\n");

/** The delimiter that parts most lines into the same number of cells, the header's. A single column needs none: a comma. */
export function sniffDelimiter(text: string, headerLine?: number): Delimiter {
  const lines = text.split(/\r\n|\n|\r/).slice(0, 50);
  const from = headerLine === undefined ? headerIndex(lines) : headerLine - 1;
  const shown = lines.slice(from, Math.max(from + 1, lines.length - 1)).filter((line) => line.trim() !== "");
  let best: Delimiter = ",";
  let most = 0;
  for (const delimiter of DELIMITERS) {
    const counts = shown.map((line) => line.replaceAll(/"[^"]*"/g, "").split(delimiter).length - 1);
    const own = counts[0] ?? 0;
    const score = own * counts.filter((count) => count === own).length;
    if (score > most) [best, most] = [delimiter, score];
  }
  return best;
}

/** The first line that is not blank and no remark. */
export const headerIndex = (lines: readonly string[]): number => Math.max(0, lines.findIndex((line) => line.trim() !== "" && !line.startsWith("#")));

/** `PK`, as every workbook begins. */
export const isWorkbook = (head: Uint8Array): boolean => head[0] === 0x50 && head[1] === 0x4b && head[2] === 0x03 && head[3] === 0x04;
