import type { Beginning } from "@/lib/imports/preview";
import { parseNumber } from "@/lib/imports/parse-number";
import { TimeParser, TIME_FORMATS, type TimeFormat } from "@/lib/imports/parse-time";
import type { Format, Mapping } from "@/lib/imports/schema";

const EARLIEST_MS = Date.UTC(1970, 0, 2);

/** How the numbers and times of the first rows are written, as far as they show it. Where day and month could change places, days come first only if some row demands it. */
export function suggestFormat({ header, rows }: Beginning, mapping: Mapping, now: Date): Pick<Format, "decimal" | "timeFormat"> {
  const cellsOf = (wanted: (field: string) => boolean) => {
    const indices = header.cells.flatMap((name, index) => (mapping[name.trim()] && wanted(mapping[name.trim()]?.field ?? "") ? [index] : []));
    return rows.flatMap(({ cells }) => indices.map((index) => cells[index] ?? "")).filter((cell) => cell.trim() !== "");
  };
  const numbers = cellsOf((field) => field !== "takenAt" && field !== "timeOfDay" && field !== "medium");
  const reads = (decimal: Format["decimal"]) => numbers.filter((cell) => !Number.isNaN(parseNumber(cell, decimal))).length;
  const decimal = reads(",") > reads(".") ? "," : ".";
  const times = cellsOf((field) => field === "takenAt");
  const plausible = (format: TimeFormat) => {
    const parser = new TimeParser(format, "UTC");
    return times.every((text) => {
      const parsed = parser.parse(text, (cell) => parseNumber(cell, decimal));
      return "ms" in parsed && parsed.ms > EARLIEST_MS && parsed.ms < now.getTime() + 86_400_000;
    });
  };
  const timeFormat = times.length === 0 ? undefined : (Object.keys(TIME_FORMATS) as TimeFormat[]).find(plausible);
  return { decimal, timeFormat: timeFormat ?? "iso" };
}
