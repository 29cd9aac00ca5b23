import { offsetMs } from "@/lib/protocol/local-time";

export const TIME_FORMATS = {
  iso: "2026-05-14 06:18:00, with or without an offset",
  dayFirst: "14.05.2026 06:18:00 or 14/05/2026 06:18:00",
  monthFirst: "05/14/2026 06:18:00 or 5/14/2026 6:18:00 AM",
  unixS: "seconds since 1970",
  unixMs: "milliseconds since 1970",
  since1904: "seconds since 1904",
  days1900: "days since 1900, as a spreadsheet counts them",
} as const;

export type TimeFormat = keyof typeof TIME_FORMATS;

const CLOCK = String.raw`(\d{1,2}):(\d{2})(?::(\d{2})(?:[.,](\d{1,9}))?)?(?:\s*([AaPp])\.?[Mm]\.?)?`;
const ISO = new RegExp(String.raw`^(\d{4})-(\d{1,2})-(\d{1,2})(?:[Tt ]\s*${CLOCK}\s*([Zz]|UTC|[+-]\d{2}:?\d{2})?)?$`);
const ORDERED = new RegExp(String.raw`^(\d{1,2})[./-](\d{1,2})[./-](\d{4})(?:[T ,]\s*${CLOCK}\s*([Zz]|UTC|[+-]\d{2}:?\d{2})?)?$`);

const DAY_MS = 86_400_000;
const SINCE_1904_MS = Date.UTC(1904, 0, 1);
/** Day 0 that makes day 61 the first of March 1900: the spreadsheets' 29 February 1900 lies before all data. */
const DAYS_1900_MS = Date.UTC(1899, 11, 30);

export type ParsedTime = { ms: number } | { reason: string };

/** Parses the times of one file in order: of a local time that comes twice when clocks go back, the second is taken once the first would be a step back. */
export class TimeParser {
  private previous = -Infinity;
  private readonly local: LocalClock;

  constructor(
    private readonly format: TimeFormat,
    timeZone: string,
  ) {
    this.local = new LocalClock(timeZone);
  }

  /** ms since 1970, whole. */
  parse(text: string, decimal: (text: string) => number): ParsedTime {
    const parsed = this.read(text, decimal);
    if ("ms" in parsed) this.previous = parsed.ms;
    return parsed;
  }

  private read(text: string, number: (text: string) => number): ParsedTime {
    // A year in front can mean nothing else, whatever was chosen; so does a workbook's date come.
    const iso = ISO.exec(text.trim());
    if (iso) return this.written(iso, [1, 2, 3], text);
    switch (this.format) {
      case "iso":
        return this.written(null, [1, 2, 3], text);
      case "dayFirst":
        return this.written(ORDERED.exec(text.trim()), [3, 2, 1], text);
      case "monthFirst":
        return this.written(ORDERED.exec(text.trim()), [3, 1, 2], text);
      case "unixS":
        return counted(number(text) * 1000, text);
      case "unixMs":
        return counted(number(text), text);
      case "since1904":
        return counted(SINCE_1904_MS + number(text) * 1000, text);
      case "days1900": {
        const parsed = counted(DAYS_1900_MS + number(text) * DAY_MS, text);
        return "ms" in parsed ? this.local.toUtc(parsed.ms, this.previous, text) : parsed;
      }
    }
  }

  private written(match: RegExpExecArray | null, [year, month, day]: readonly [number, number, number], text: string): ParsedTime {
    if (!match) return { reason: `“${shortened(text)}” is not a time of the form chosen` };
    const [y, m, d] = [Number(match[year]), Number(match[month]), Number(match[day])];
    const half = match[8]?.toLowerCase();
    const hour = match[4] === undefined ? 0 : twelveHours(Number(match[4]), half);
    const [minute, second] = [Number(match[5] ?? 0), Number(match[6] ?? 0)];
    const fraction = match[7] === undefined ? 0 : Math.round(Number(`0.${match[7]}`) * 1000);
    const midnight = Date.UTC(y, m - 1, d);
    const date = new Date(midnight);
    if (y < 100 || date.getUTCMonth() !== m - 1 || date.getUTCDate() !== d) return { reason: `“${shortened(text)}”: there is no such day` };
    if (!(hour <= 23) || minute > 59 || second > 59) return { reason: `“${shortened(text)}”: there is no such time of day` };
    const local = midnight + ((hour * 60 + minute) * 60 + second) * 1000 + fraction;
    const offset = match[9];
    return offset === undefined ? this.local.toUtc(local, this.previous, text) : { ms: local - offsetOf(offset) };
  }
}

const twelveHours = (hour: number, half: string | undefined): number => (half === undefined ? hour : hour < 1 || hour > 12 ? NaN : (hour % 12) + (half === "p" ? 12 : 0));

function offsetOf(text: string): number {
  if (/^(z|utc)$/i.test(text)) return 0;
  const digits = text.replace(":", "");
  const minutes = Number(digits.slice(1, 3)) * 60 + Number(digits.slice(3));
  return (text.startsWith("-") ? -minutes : minutes) * 60_000;
}

const counted = (ms: number, text: string): ParsedTime => (Number.isFinite(ms) ? { ms: Math.round(ms) } : { reason: `“${shortened(text)}” is not a number` });

/** A cell as a message repeats it. */
export const shortened = (text: string): string => (text.length > 60 ? `${text.slice(0, 57)}…` : text);

const QUARTER_MS = 15 * 60_000;

/** Clocks change at quarters of an hour, so that a quarter has one set of offsets: neighbouring rows look them up once. */
class LocalClock {
  private quarter = NaN;
  private offsets: readonly number[] = [];

  constructor(private readonly timeZone: string) {}

  toUtc(localMs: number, previous: number, text: string): ParsedTime {
    const quarter = Math.floor(localMs / QUARTER_MS);
    if (quarter !== this.quarter) {
      this.offsets = offsetsAt(quarter * QUARTER_MS, this.timeZone);
      this.quarter = quarter;
    }
    if (this.offsets.length === 0) return { reason: `“${shortened(text)}” does not exist in ${this.timeZone}, where clocks went forward over it; if the file keeps one time all year, choose another time zone` };
    const [first, second] = this.offsets;
    const ms = localMs - first;
    return { ms: second !== undefined && ms < previous ? localMs - second : ms };
  }
}

/** The offsets at which this local time was shown, the earlier instant first; none in a gap. */
function offsetsAt(localMs: number, timeZone: string): number[] {
  const around = [localMs - DAY_MS, localMs + DAY_MS].map((ms) => offsetMs(ms, timeZone));
  const shown = around.filter((offset) => offsetMs(localMs - offset, timeZone) === offset);
  return [...new Set(shown)].sort((a, b) => b - a);
}
