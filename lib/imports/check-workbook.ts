import { inflateRawSync } from "node:zlib";
import { archiveEntries } from "@/lib/imports/archive-entries";
import { MOST_UNPACKED_BYTES, TOO_LARGE } from "@/lib/imports/workbook-rows";

/** Unpacks everything once within bounds, since a directory may state less than there is. @throws RangeError when it is too much, or damaged. */
export function checkWorkbook(archive: Uint8Array, most = MOST_UNPACKED_BYTES): void {
  let left = most;
  for (const { deflated, bytes } of archiveEntries(archive)) {
    if (left < 1) throw new RangeError(TOO_LARGE);
    try {
      left -= deflated ? inflateRawSync(bytes, { maxOutputLength: left }).length : bytes.length;
    } catch (error) {
      throw new RangeError((error as NodeJS.ErrnoException).code === "ERR_BUFFER_TOO_LARGE" ? TOO_LARGE : "the workbook is damaged");
    }
  }
}
