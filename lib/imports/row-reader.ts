import type { Columns, Layout, UsedColumn } from "@/lib/imports/columns-of";
import { fieldInfo, unitOf, type Field } from "@/lib/imports/fields";
import { isMissing, parseNumber, type Decimal } from "@/lib/imports/parse-number";
import { shortened, TimeParser } from "@/lib/imports/parse-time";
import type { CsvRow } from "@/lib/imports/csv-splitter";
import type { Format } from "@/lib/imports/schema";

/** What is wrong with a row, and where. */
export type RowError = { line: number; column: string; message: string };

/** One row in our units; NaN where a column is absent or its cell says that there is no value. */
export type ReadRow = { line: number; at: number; medium: string; numbers: readonly number[]; cells: readonly string[] };

/** Fields of a row that are numbers, by their place in `numbers`. */
export const NUMBERS = ["cycle", "setPointC", "temperatureC", "pressurePa", "humidityPercent", "f0Hz", "q", "f0StdHz", "qStd", "amplitudeV", "frequencyHz", "startHz", "stopHz", "re", "im", "magnitude"] as const satisfies readonly Field[];
export type NumberField = (typeof NUMBERS)[number];
export const PLACE = Object.fromEntries(NUMBERS.map((field, i) => [field, i])) as Record<NumberField, number>;

const LISTS: readonly Field[] = ["re", "im", "magnitude"];
const KEYS: readonly Field[] = ["cycle", "setPointC"];
const MOST_MEDIUM = 60;
const EARLIEST_MS = Date.UTC(1900, 0, 1);
const AHEAD_MS = 86_400_000;
const CONTROL = /\p{Cc}/u;

type NumberColumn = { field: NumberField; place: number; index: number; name: string; to: (value: number, f0Hz: number) => number; least: number; most: number; needed: boolean; whole: boolean };

export type RowReaderOptions = {
  /** Nothing can have been measured later. */
  now: Date;
  /** Only what decides about phases is read: time, medium, cycle and set-point. */
  keysOnly?: boolean;
};

/** Reads rows of one file into our units, and says of every cell that cannot be read where it stands and why. */
export class RowReader {
  private readonly width: number;
  private readonly time: TimeParser;
  private readonly number: (text: string) => number;
  private readonly numbers: readonly NumberColumn[];
  private readonly timeColumn: { index: number; name: string };
  private readonly ofDay: number | undefined;
  private readonly mediumColumn: { index: number; name: string } | undefined;
  private readonly media = new Map<string, string>();
  private readonly latestMs: number;
  readonly keysOnly: boolean;
  private readonly onlyMedium: string;
  private readonly gaps: boolean;
  private lastTime: { text: string | undefined; ms: number } = { text: undefined, ms: NaN };
  private errors: RowError[] | undefined;
  private line = 0;
  readonly layout: Layout;
  /** Where lists of values stand in a row that is a sweep. */
  readonly lists: Readonly<Record<"re" | "im" | "magnitude", UsedColumn | undefined>>;

  constructor(
    { layout, used }: Columns,
    private readonly format: Format,
    { now, keysOnly = false }: RowReaderOptions,
  ) {
    this.keysOnly = keysOnly;
    this.latestMs = now.getTime() + AHEAD_MS;
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
    this.onlyMedium = mediumName(format.medium ?? "");
    this.lists = { re: find("re"), im: find("im"), magnitude: find("magnitude") };
    // f0 comes first: other columns may be told relative to it.
    this.numbers = NUMBERS.toSorted((a, b) => Number(b === "f0Hz") - Number(a === "f0Hz")).flatMap((field): NumberColumn[] => {
      const column = find(field);
      if (!column || (layout === "sweeps" && LISTS.includes(field)) || (keysOnly && !KEYS.includes(field))) return [];
      const { least = -Infinity, most = Infinity } = fieldInfo(field);
      return [{ field, place: PLACE[field], index: column.index, name: column.name, to: unitOf(field, column.unit).to, least, most, needed: NEEDED[layout].includes(field), whole: field === "cycle" }];
    });
  }

  /** The row, or what is wrong with it: every bad cell. */
  read({ line, cells }: CsvRow): ReadRow | RowError[] {
    this.errors = undefined;
    this.line = line;
    if (cells.length < this.width) return [{ line, column: "", message: `has ${cells.length} cells where the header's columns need ${this.width}` }];

    const at = this.readTime(cells);
    const medium = this.readMedium(cells);
    const numbers = [NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN, NaN];
    for (const column of this.numbers) numbers[column.place] = this.readNumber(column, cells[column.index], numbers[PLACE.f0Hz]);
    return this.errors ?? { line, at, medium, numbers, cells };
  }

  private fail(column: string, message: string): void {
    (this.errors ??= []).push({ line: this.line, column, message });
  }

  private readTime(cells: readonly string[]): number {
    const { index, name } = this.timeColumn;
    const text = this.ofDay === undefined ? cells[index] : `${cells[index]} ${cells[this.ofDay]}`;
    if (text === this.lastTime.text) return this.lastTime.ms;
    const reason = this.whyNoTime(text);
    if (reason === undefined) return this.lastTime.ms;
    this.fail(name, reason);
    return NaN;
  }

  /** Leaves the time in `lastTime`, where neighbours of the same time find it. */
  private whyNoTime(text: string): string | undefined {
    if (text.trim() === "") return "has no time";
    const parsed = this.time.parse(text, this.number);
    if ("reason" in parsed) return parsed.reason;
    if (parsed.ms < EARLIEST_MS) return `“${shortened(text)}” lies before 1900`;
    if (parsed.ms > this.latestMs) return `“${shortened(text)}” lies in the future`;
    this.lastTime = { text, ms: parsed.ms };
    return undefined;
  }

  private readMedium(cells: readonly string[]): string {
    if (!this.mediumColumn) return this.onlyMedium;
    const { index, name: column } = this.mediumColumn;
    const text = cells[index];
    const known = this.media.get(text);
    if (known !== undefined) return known;
    const name = mediumName(text);
    if (name === "") this.fail(column, "names no medium");
    else if (name.length > MOST_MEDIUM) this.fail(column, `is longer than ${MOST_MEDIUM} characters`);
    else if (CONTROL.test(name)) this.fail(column, "holds a control character");
    else this.media.set(text, name);
    return name;
  }

  private readNumber({ field, name, to, least, most, needed, whole }: NumberColumn, text: string, f0Hz: number): number {
    if (isMissing(text)) {
      if (needed && !this.gaps) this.fail(name, "has no value");
      return NaN;
    }
    const value = this.number(text);
    if (Number.isNaN(value)) return this.noNumber(name, text);
    const ours = to(value, f0Hz);
    if (ours >= least && ours <= most && Number.isFinite(ours) && (!whole || Number.isInteger(ours))) return ours;
    // What is told relative to f0 is not wrong by itself where f0 is missing.
    if (!Number.isFinite(ours) && Number.isNaN(f0Hz) && field !== "f0Hz") return NaN;
    const shown = `“${shortened(text)}”`;
    this.fail(name, whole && !Number.isInteger(ours) ? `${shown} is not a whole number` : least === Number.MIN_VALUE ? `${shown} must be above 0` : `${shown} lies outside of ${least} to ${most}`);
    return NaN;
  }

  private noNumber(name: string, text: string): number {
    const comma = this.format.decimal === "." && /^[+-]?\d+,\d+$/.test(text.trim());
    this.fail(name, `“${shortened(text)}” is not a number${comma ? "; is the comma its decimal sign?" : ""}`);
    return NaN;
  }
}

const NEEDED: Record<Layout, readonly NumberField[]> = { values: ["f0Hz", "q", "cycle"], points: ["frequencyHz", "re", "im", "magnitude", "cycle"], sweeps: ["startHz", "stopHz", "cycle"] };

/** Air in any case is our `air`. */
const mediumName = (text: string): string => {
  const name = text.trim();
  return name.toLowerCase() === "air" ? "air" : name;
};
