import type { CsvRow } from "@/lib/imports/csv-splitter";
import type { Format } from "@/lib/imports/schema";

/** Parts the rows of a file into the header and what follows it; what stands before, and between header and `firstLine`, is left out. */
export class HeadReader {
  header: CsvRow | undefined;

  constructor(private readonly format: Pick<Format, "headerLine" | "firstLine">) {}

  /** True for a row of values. */
  isData(row: CsvRow): boolean {
    if (this.header) return row.line >= (this.format.firstLine ?? 0);
    const { headerLine } = this.format;
    const isHeader = headerLine === undefined ? !row.cells[0].startsWith("#") : row.line >= headerLine;
    if (isHeader) this.header = row;
    return false;
  }
}
