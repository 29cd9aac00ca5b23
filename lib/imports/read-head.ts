import type { CsvRow } from "@/lib/imports/csv-splitter";
import type { Format } from "@/lib/imports/schema";

/** Parts the rows of a file into the header and what follows it; what stands before, between header and `firstLine`, and remarks that begin with #, is left out. */
export class HeadReader {
  header: CsvRow | undefined;

  constructor(private readonly format: Pick<Format, "headerLine" | "firstLine">) {}

  /** True for a row of values. */
  isData(row: CsvRow): boolean {
    if (this.header) return row.line >= (this.format.firstLine ?? 0) && !row.cells[0].startsWith("#");
    const { headerLine } = this.format;
    const isHeader = headerLine === undefined ? !row.cells[0].startsWith("#") : row.line >= headerLine;
    if (isHeader) this.header = row;
    return false;
  }
}
