import type { Columns, Layout } from "@/lib/imports/columns-of";
import { fieldInfo, unitOf, type Field } from "@/lib/imports/fields";
import { isMissing, parseNumber, type Decimal } from "@/lib/imports/parse-number";
import { shortened, TimeParser } from "@/lib/imports/parse-time";
import type { CsvRow } from "@/lib/imports/csv-splitter";
import type { Format } from "@/lib/imports/schema";

/** What is wrong with a row, and where. */
export type RowError = { line: number; column: string; message: string };

/** One row in our units; NaN where a column is absent or its cell says that there is no value. */
export type ReadRow = { line: number; at: number; medium: string; numbers: Float64Array; lists: readonly string[] };

/** Fields of a row that are numbers, by their place in `numbers`. */
export const NUMBERS = ["cycle", "setPointC", "temperatureC", "pressurePa", "humidityPercent", "f0Hz", "q", "f0StdHz", "qStd", "amplitudeV", "frequencyHz", "startHz", "stopHz", "re", "im", "magnitude"] as const satisfies readonly Field[];
export type NumberField = (typeof NUMBERS)[number];
export const PLACE = Object.fromEntries(NUMBERS.map((field, i) => [field, i])) as Record<NumberField, number>;

const LISTS = ["re", "im", "magnitude"] as const;
const MOST_MEDIUM = 60;
const EARLIEST_MS = Date.UTC(1900, 0, 1);
const AHEAD_MS = 86_400_000;
const CONTROL = /\p{Cc}/u;

type NumberColumn = { field: NumberField; index: number; name: string; to: (value: number, f0Hz: number) => number; least: number; most: number; needed: boolean; whole: boolean };

/** Reads rows of one file into our units, and says of every cell that cannot be read where it stands and why. `now`: nothing can have been measured later. */
export class RowReader {
  private readonly width: number;
  private readonly time: TimeParser;
  private readonly number: (text: string) => number;
  private readonly numbers: readonly NumberColumn[];
  private readonly lists: readonly { place: number; index: number }[];
  private readonly timeColumn: { index: number; name: string };
  private readonly ofDay: number | undefined;
  private readonly mediumColumn: { index: number; name: string } | undefined;
  private readonly media = new Map<string, string>();
  private readonly gaps: boolean;
  readonly layout: Layout;

  constructor(
    { layout, used }: Columns,
    private readonly format: Format,
    private readonly now: Date,
  ) {
    const decimal: Decimal = format.decimal;
    const find = (field: Field) => used.find((column) => column.field === field);
    this.layout = layout;
    this.gaps = format.gaps === "keep" && layout === "values";
    this.number = (text) => parseNumber(text, decimal);
    this.time = new TimeParser(format.timeFormat, format.timeZone);
    this.timeColumn = find("takenAt") ?? { index: -1, name: "takenAt" };
    this.ofDay = find("timeOfDay")?.index;
    this.mediumColumn = find("medium");
    this.width = Math.max(...used.map(({ index }) => index)) + 1;
    const inLists = (field: Field) => layout === "sweeps" && (LISTS as readonly Field[]).includes(field);
    this.lists = layout === "sweeps" ? LISTS.flatMap((field, place) => (find(field) ? [{ place, index: find(field)?.index ?? -1 }] : [])) : [];
    // f0 comes first: other columns may be told relative to it.
    this.numbers = NUMBERS.toSorted((a, b) => Number(b === "f0Hz") - Number(a === "f0Hz")).flatMap((field): NumberColumn[] => {
      const column = find(field);
      if (!column || inLists(field)) return [];
      const { least = -Infinity, most = Infinity } = fieldInfo(field);
      return [{ field, index: column.index, name: column.name, to: unitOf(field, column.unit).to, least, most, needed: NEEDED[layout].includes(field), whole: field === "cycle" }];
    });
  }

  /** The row, or what is wrong with it: every bad cell. */
  read({ line, cells }: CsvRow): ReadRow | RowError[] {
    const errors: RowError[] = [];
    const fail = (column: string, message: string) => void errors.push({ line, column, message });
    if (cells.length < this.width) return [{ line, column: "", message: `has ${cells.length} cells where the header's columns need ${this.width}` }];

    const at = this.readTime(cells, fail);
    const medium = this.readMedium(cells, fail);
    const numbers = new Float64Array(NUMBERS.length).fill(NaN);
    for (const column of this.numbers) numbers[PLACE[column.field]] = this.readNumber(column, cells[column.index], numbers[PLACE.f0Hz], fail);
    const lists = ["", "", ""];
    for (const { place, index } of this.lists) lists[place] = cells[index];
    return errors.length > 0 ? errors : { line, at, medium, numbers, lists };
  }

  private readTime(cells: readonly string[], fail: (column: string, message: string) => void): number {
    const { index, name } = this.timeColumn;
    const text = this.ofDay === undefined ? cells[index] : `${cells[index]} ${cells[this.ofDay]}`;
    if (text.trim() === "") return fail(name, "has no time"), NaN;
    const parsed = this.time.parse(text, this.number);
    if ("reason" in parsed) return fail(name, parsed.reason), NaN;
    if (parsed.ms < EARLIEST_MS) return fail(name, `“${shortened(text)}” lies before 1900`), NaN;
    if (parsed.ms > this.now.getTime() + AHEAD_MS) return fail(name, `“${shortened(text)}” lies in the future`), NaN;
    return parsed.ms;
  }

  private readMedium(cells: readonly string[], fail: (column: string, message: string) => void): string {
    if (!this.mediumColumn) return mediumName(this.format.medium ?? "");
    const text = cells[this.mediumColumn.index];
    const known = this.media.get(text);
    if (known !== undefined) return known;
    const name = mediumName(text);
    if (name === "") fail(this.mediumColumn.name, "names no medium");
    else if (name.length > MOST_MEDIUM) fail(this.mediumColumn.name, `is longer than ${MOST_MEDIUM} characters`);
    else if (CONTROL.test(name)) fail(this.mediumColumn.name, "holds a control character");
    else this.media.set(text, name);
    return name;
  }

  private readNumber(column: NumberColumn, text: string, f0Hz: number, fail: (column: string, message: string) => void): number {
    const { name, to, least, most, needed, whole } = column;
    if (isMissing(text)) {
      if (needed && !this.gaps) fail(name, "has no value");
      return NaN;
    }
    const value = this.number(text);
    if (Number.isNaN(value)) return fail(name, `“${shortened(text)}” is not a number${this.format.decimal === "." && /^[+-]?\d+,\d+$/.test(text.trim()) ? "; is the comma its decimal sign?" : ""}`), NaN;
    const ours = to(value, f0Hz);
    if (whole && !Number.isInteger(ours)) return fail(name, `“${shortened(text)}” is not a whole number`), NaN;
    if (!Number.isFinite(ours) && Number.isNaN(f0Hz) && column.field !== "f0Hz") return NaN;
    if (!(ours >= least && ours <= most && Number.isFinite(ours))) return fail(name, least === Number.MIN_VALUE ? `“${shortened(text)}” must be above 0` : `“${shortened(text)}” lies outside of ${least} to ${most}`), NaN;
    return ours;
  }
}

const NEEDED: Record<Layout, readonly NumberField[]> = { values: ["f0Hz", "q", "cycle"], points: ["frequencyHz", "re", "im", "magnitude", "cycle"], sweeps: ["startHz", "stopHz", "cycle"] };

/** Air in any case is our `air`. */
const mediumName = (text: string): string => {
  const name = text.trim();
  return name.toLowerCase() === "air" ? "air" : name;
};
