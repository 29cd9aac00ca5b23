import type { CsvRow } from "@/lib/imports/csv-splitter";
import { isMissing, parseNumber, type Decimal } from "@/lib/imports/parse-number";
import { PLACE, type ReadRow, type RowError, type RowReader } from "@/lib/imports/row-reader";
import { shortened } from "@/lib/imports/parse-time";
import { KIND, type SweepRecord } from "@/lib/readings/reading";

/** One reading of a file: a row of values, a row that is a sweep, or all the rows that are the points of one. */
export type Item = { line: number; at: number; medium: string; numbers: Float64Array; record: SweepRecord };

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
    if (this.reader.layout === "values") this.take.item({ ...read, record: fittedRecord(read.numbers) });
    else if (this.reader.layout === "sweeps") this.sweep(read);
    else this.point(read);
  }

  end(): void {
    this.endOfPoints();
  }

  private sweep(row: ReadRow): void {
    const [re, im, magnitude] = row.lists;
    const fail = (column: string, message: string) => this.take.error({ line: row.line, column, message });
    const first = magnitude === "" ? "re" : "magnitude";
    const one = parseList(magnitude === "" ? re : magnitude, this.decimal);
    if ("reason" in one) return fail(first, one.reason);
    const other = magnitude === "" ? parseList(im, this.decimal) : undefined;
    if (other && "reason" in other) return fail("im", other.reason);
    const points = one.values.length;
    if (points < FEWEST_POINTS || points > MOST_POINTS) return fail(first, `a sweep has ${FEWEST_POINTS} to ${MOST_POINTS} points, this one has ${points}`);
    if (other && other.values.length !== points) return fail("im", `has ${other.values.length} values where re has ${points}`);
    const [startHz, stopHz] = [row.numbers[PLACE.startHz], row.numbers[PLACE.stopHz]];
    if (startHz === stopHz) return fail("stopHz", "stopHz must differ from startHz");
    this.take.item({ ...row, record: { kind: other ? KIND.complex : KIND.magnitude, startHz, stopHz, points, data: other ? joined(one.values, other.values) : one.values } });
  }

  private point(row: ReadRow): void {
    const [first] = this.points;
    if (first && !belongs(first, row)) this.endOfPoints();
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
    if (points.length < FEWEST_POINTS) {
      return this.take.error({ line: first.line, column: "takenAt", message: `a sweep has at least ${FEWEST_POINTS} points, this one has ${points.length}; rows with the same time and medium are one sweep` });
    }
    const column = (place: number) => Float64Array.from(points, ({ numbers }) => numbers[place]);
    const frequencyHz = column(PLACE.frequencyHz);
    if (frequencyHz.every((hz) => hz === frequencyHz[0])) return this.take.error({ line: first.line, column: "frequencyHz", message: "all points of this sweep have the same frequency" });
    const magnitude = column(PLACE.magnitude);
    const complex = Number.isNaN(magnitude[0]);
    const values = complex ? joined(column(PLACE.re), column(PLACE.im)) : magnitude;
    const kind = complex ? KIND.complex : KIND.magnitude;
    const grid = isEven(frequencyHz)
      ? { startHz: frequencyHz[0], stopHz: frequencyHz[points.length - 1], data: values }
      : { data: joined(frequencyHz, values) };
    this.take.item({ ...first, record: { kind, points: points.length, ...grid } });
  }
}

const belongs = (a: ReadRow, b: ReadRow): boolean => a.at === b.at && a.medium === b.medium && Object.is(a.numbers[PLACE.cycle], b.numbers[PLACE.cycle]);

const fittedRecord = (numbers: Float64Array): SweepRecord => ({
  kind: KIND.fitted,
  points: 1,
  data: Float64Array.of(numbers[PLACE.f0Hz], numbers[PLACE.q], numbers[PLACE.f0StdHz], numbers[PLACE.qStd], numbers[PLACE.amplitudeV]),
});

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
  return frequencyHz.every((hz, i) => Math.abs(hz - (start + ((stop - start) * i) / last)) <= 1e-9 * hz) && start !== stop;
}

/** Numbers with blanks, semicolons or vertical bars between them; commas too where the decimal sign is the point. */
function parseList(text: string, decimal: Decimal): { values: Float64Array } | { reason: string } {
  const parts = text.trim().replace(/^\[|\]$/g, "").split(decimal === "." ? /[\s,;|]+/ : /[\s;|]+/);
  const values = new Float64Array(parts.length);
  for (let i = 0; i < parts.length; i++) {
    values[i] = isMissing(parts[i]) ? NaN : parseNumber(parts[i], decimal);
    if (Number.isNaN(values[i])) return { reason: `value ${i + 1}, “${shortened(parts[i])}”, is not a number` };
  }
  return { values };
}
