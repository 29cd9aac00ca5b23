export type ArchiveEntry = {
  /** Whether its bytes are deflated; else they are stored as they are. */
  deflated: boolean;
  bytes: Uint8Array;
  /** Its size unpacked, as the directory states it. */
  unpacked: number;
};

const END_OF_DIRECTORY = 0x06054b50;
const ENTRY = 0x02014b50;
const NOT_READABLE = "this is no workbook that can be read; save the sheet as CSV";

/** The files of a zip archive by its directory (APPNOTE.TXT 4.3.12, 4.3.16). @throws RangeError for a directory that is none. */
export function archiveEntries(bytes: Uint8Array): ArchiveEntry[] {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  let end = bytes.length - 22;
  while (end > 0 && end > bytes.length - 66_000 && view.getUint32(end, true) !== END_OF_DIRECTORY) end--;
  try {
    if (view.getUint32(end, true) !== END_OF_DIRECTORY) throw new RangeError(NOT_READABLE);
    const count = view.getUint16(end + 10, true);
    let at = view.getUint32(end + 16, true);
    const entries: ArchiveEntry[] = [];
    for (let i = 0; i < count; i++) {
      if (view.getUint32(at, true) !== ENTRY) throw new RangeError(NOT_READABLE);
      const local = view.getUint32(at + 42, true);
      const from = local + 30 + view.getUint16(local + 26, true) + view.getUint16(local + 28, true);
      entries.push({ deflated: view.getUint16(at + 10, true) === 8, bytes: bytes.subarray(from, from + view.getUint32(at + 20, true)), unpacked: view.getUint32(at + 24, true) });
      at += 46 + view.getUint16(at + 28, true) + view.getUint16(at + 30, true) + view.getUint16(at + 32, true);
    }
    return entries;
  } catch {
    throw new RangeError(NOT_READABLE);
  }
}
