import { deflateRawSync } from "node:zlib";

type Cell = string | number | Date | { formula: string; value: number | string } | null;

const escaped = (text: string): string => text.replaceAll("&", "&amp;").replaceAll("<", "&lt;").replaceAll('"', "&quot;");
const column = (i: number): string => String.fromCharCode(65 + i);
/** Days since 30 December 1899. */
const serial = (date: Date): number => (date.getTime() - Date.UTC(1899, 11, 30)) / 86_400_000;

function cellXml(cell: Cell, at: string): string {
  if (cell === null) return "";
  if (typeof cell === "number") return `<c r="${at}"><v>${cell}</v></c>`;
  if (typeof cell === "string") return `<c r="${at}" t="inlineStr"><is><t>${escaped(cell)}</t></is></c>`;
  if (cell instanceof Date) return `<c r="${at}" s="1"><v>${serial(cell)}</v></c>`;
  return `<c r="${at}"${typeof cell.value === "string" ? ' t="str"' : ""}><f>${escaped(cell.formula)}</f><v>${cell.value}</v></c>`;
}

/** A workbook of one sheet, ECMA-376 with no more than must be there. */
export function workbookOf(rows: readonly (readonly Cell[])[], { statedSize }: { statedSize?: number } = {}): Uint8Array<ArrayBuffer> {
  const sheet = rows.map((cells, r) => `<row r="${r + 1}">${cells.map((cell, c) => cellXml(cell, `${column(c)}${r + 1}`)).join("")}</row>`).join("");
  const main = "http://schemas.openxmlformats.org/spreadsheetml/2006/main";
  const rels = "http://schemas.openxmlformats.org/officeDocument/2006/relationships";
  const files = {
    "[Content_Types].xml": `<Types xmlns="http://schemas.openxmlformats.org/package/2006/content-types"><Default Extension="rels" ContentType="application/vnd.openxmlformats-package.relationships+xml"/><Default Extension="xml" ContentType="application/xml"/><Override PartName="/xl/workbook.xml" ContentType="application/vnd.openxmlformats-officedocument.spreadsheetml.sheet.main+xml"/></Types>`,
    "_rels/.rels": `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="${rels}/officeDocument" Target="xl/workbook.xml"/></Relationships>`,
    "xl/workbook.xml": `<workbook xmlns="${main}" xmlns:r="${rels}"><sheets><sheet name="Data" sheetId="1" r:id="rId1"/></sheets></workbook>`,
    "xl/_rels/workbook.xml.rels": `<Relationships xmlns="http://schemas.openxmlformats.org/package/2006/relationships"><Relationship Id="rId1" Type="${rels}/worksheet" Target="worksheets/sheet1.xml"/><Relationship Id="rId2" Type="${rels}/styles" Target="styles.xml"/></Relationships>`,
    "xl/styles.xml": `<styleSheet xmlns="${main}"><cellXfs count="2"><xf numFmtId="0"/><xf numFmtId="22" applyNumberFormat="1"/></cellXfs></styleSheet>`,
    "xl/worksheets/sheet1.xml": `<worksheet xmlns="${main}"><sheetData>${sheet}</sheetData></worksheet>`,
  };
  return archive(Object.entries(files).map(([name, text]) => ({ name, bytes: Buffer.from(`<?xml version="1.0" encoding="UTF-8"?>${text}`) })), statedSize);
}

/** A zip archive; `statedSize` in place of the true size of the last file, as only somebody hostile writes it. */
function archive(files: readonly { name: string; bytes: Buffer }[], statedSize?: number): Uint8Array<ArrayBuffer> {
  const locals: Buffer[] = [];
  const directory: Buffer[] = [];
  let offset = 0;
  for (const [i, { name, bytes }] of files.entries()) {
    const packed = deflateRawSync(bytes);
    const about = Buffer.alloc(26);
    about.writeUInt16LE(20, 0);
    about.writeUInt16LE(8, 4);
    about.writeUInt32LE(crc32(bytes), 10);
    about.writeUInt32LE(packed.length, 14);
    about.writeUInt32LE(i === files.length - 1 ? (statedSize ?? bytes.length) : bytes.length, 18);
    about.writeUInt16LE(name.length, 22);
    const local = Buffer.concat([Buffer.from("PK\x03\x04", "latin1"), about, Buffer.from(name), packed]);
    const tail = Buffer.alloc(14);
    tail.writeUInt32LE(offset, 10);
    directory.push(Buffer.concat([Buffer.from("PK\x01\x02", "latin1"), Buffer.from([20, 0]), about, tail, Buffer.from(name)]));
    locals.push(local);
    offset += local.length;
  }
  const entries = Buffer.concat(directory);
  const end = Buffer.alloc(18);
  end.writeUInt16LE(files.length, 4);
  end.writeUInt16LE(files.length, 6);
  end.writeUInt32LE(entries.length, 8);
  end.writeUInt32LE(offset, 12);
  return new Uint8Array(Buffer.concat([...locals, entries, Buffer.from("PK\x05\x06", "latin1"), end]));
}

function crc32(bytes: Buffer): number {
  let crc = -1;
  for (const byte of bytes) {
    crc ^= byte;
    for (let bit = 0; bit < 8; bit++) crc = (crc >>> 1) ^ (crc & 1 ? 0xedb88320 : 0);
  }
  return ~crc >>> 0;
}
