import type { CsvRow } from "@/lib/imports/csv-splitter";
import { unitOf } from "@/lib/imports/fields";
import { isMissing, parseNumber, type Decimal } from "@/lib/imports/parse-number";
import { PLACE, type ReadRow, type RowError, type RowReader } from "@/lib/imports/row-reader";
import { shortened } from "@/lib/imports/parse-time";
import { KIND, type SweepRecord } from "@/lib/readings/reading";

/** One reading of a file: a row of values, a row that is a sweep, or all the rows that are the points of one. Values have no record beside their numbers; that of a sweep is made for whoever asks. */
export type Item = Pick<ReadRow, "line" | "at" | "medium" | "numbers"> & { record?: () => SweepRecord };

export type Take = { item: (item: Item) => void; error: (error: RowError) => void };

const FEWEST_POINTS = 11;
const MOST_POINTS = 4001;

/** Makes readings of rows as they come. */
export class Assembler {
  private points: ReadRow[] = [];

  constructor(
    private readonly reader: RowReader,
    private readonly decimal: Decimal,
    private readonly take: Take,
  ) {}

  push(row: CsvRow): void {
    const read = this.reader.read(row);
    if (Array.isArray(read)) return read.forEach(this.take.error);
    if (this.reader.layout === "values" || (this.reader.keysOnly && this.reader.layout === "sweeps")) this.take.item(read);
    else if (this.reader.layout === "sweeps") this.sweep(read);
    else this.point(read);
  }

  end(): void {
    this.endOfPoints();
  }

  private sweep(row: ReadRow): void {
    const { re, im, magnitude } = this.reader.lists;
    const first = magnitude ?? re;
    if (!first) return;
    const fail = (column: string, message: string) => this.take.error({ line: row.line, column, message });
    const one = parseList(row.cells[first.index], this.decimal, first.unit);
    if ("reason" in one) return fail(first.name, one.reason);
    const other = !magnitude && im ? parseList(row.cells[im.index], this.decimal, im.unit) : undefined;
    if (other && "reason" in other) return fail("im", other.reason);
    const points = one.values.length;
    if (points < FEWEST_POINTS || points > MOST_POINTS) return fail(first.name, `a sweep has ${FEWEST_POINTS} to ${MOST_POINTS} points, this one has ${points}`);
    if (other && other.values.length !== points) return fail("im", `has ${other.values.length} values where re has ${points}`);
    const [startHz, stopHz] = [row.numbers[PLACE.startHz], row.numbers[PLACE.stopHz]];
    if (startHz === stopHz) return fail("stopHz", "stopHz must differ from startHz");
    const { line, at, medium, numbers } = row;
    const record = () => ({ kind: other ? KIND.complex : KIND.magnitude, startHz, stopHz, points, data: other ? joined(one.values, other.values) : one.values });
    this.take.item({ line, at, medium, numbers, record });
  }

  private point(row: ReadRow): void {
    const [first] = this.points;
    if (first && !belongs(first, row)) this.endOfPoints();
    else if (first && this.reader.keysOnly) return;
    this.points.push(row);
    if (this.points.length > MOST_POINTS) {
      this.take.error({ line: first.line, column: "takenAt", message: `more than ${MOST_POINTS} points have the same time and medium; a sweep has one time and the next another` });
      this.points = [];
    }
  }

  private endOfPoints(): void {
    const { points } = this;
    const [first] = points;
    if (!first) return;
    this.points = [];
    if (this.reader.keysOnly) return this.take.item(first);
    if (points.length < FEWEST_POINTS) {
      return this.take.error({ line: first.line, column: "takenAt", message: `a sweep has at least ${FEWEST_POINTS} points, this one has ${points.length}; rows with the same time and medium are one sweep` });
    }
    const hz = first.numbers[PLACE.frequencyHz];
    if (points.every(({ numbers }) => numbers[PLACE.frequencyHz] === hz)) return this.take.error({ line: first.line, column: "frequencyHz", message: "all points of this sweep have the same frequency" });
    const { line, at, medium, numbers } = first;
    this.take.item({ line, at, medium, numbers, record: () => recordOfPoints(points) });
  }
}

function recordOfPoints(points: readonly ReadRow[]): SweepRecord {
  const frequencyHz = columnOf(points, PLACE.frequencyHz);
  const complex = Number.isNaN(points[0].numbers[PLACE.magnitude]);
  const values = complex ? joined(columnOf(points, PLACE.re), columnOf(points, PLACE.im)) : columnOf(points, PLACE.magnitude);
  const kind = complex ? KIND.complex : KIND.magnitude;
  if (!isEven(frequencyHz)) return { kind, points: points.length, data: joined(frequencyHz, values) };
  return { kind, points: points.length, startHz: frequencyHz[0], stopHz: frequencyHz[points.length - 1], data: values };
}

function columnOf(points: readonly ReadRow[], place: number): Float64Array {
  const column = new Float64Array(points.length);
  for (let i = 0; i < points.length; i++) column[i] = points[i].numbers[place];
  return column;
}

const belongs = (a: ReadRow, b: ReadRow): boolean => a.at === b.at && a.medium === b.medium && Object.is(a.numbers[PLACE.cycle], b.numbers[PLACE.cycle]);

function joined(a: Float64Array, b: Float64Array): Float64Array {
  const both = new Float64Array(a.length + b.length);
  both.set(a);
  both.set(b, a.length);
  return both;
}

/** Within a billionth of the evenly spaced grid between its ends. */
function isEven(frequencyHz: Float64Array): boolean {
  const last = frequencyHz.length - 1;
  const [start, stop] = [frequencyHz[0], frequencyHz[last]];
  for (let i = 0; i <= last; i++) if (!(Math.abs(frequencyHz[i] - (start + ((stop - start) * i) / last)) <= 1e-9 * frequencyHz[i])) return false;
  return start !== stop;
}

/** Numbers with blanks, semicolons or vertical bars between them; commas too where the decimal sign is the point. */
function parseList(text: string, decimal: Decimal, unit?: string): { values: Float64Array } | { reason: string } {
  const { to } = unitOf("re", unit);
  const parts = text.trim().replace(/^\[|\]$/g, "").split(decimal === "." ? /[\s,;|]+/ : /[\s;|]+/);
  const values = new Float64Array(parts.length);
  for (let i = 0; i < parts.length; i++) {
    values[i] = isMissing(parts[i]) ? NaN : to(parseNumber(parts[i], decimal), NaN);
    if (Number.isNaN(values[i])) return { reason: `value ${i + 1}, “${shortened(parts[i])}”, is not a number` };
  }
  return { values };
}
