import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { Assembler, type Item } from "@/lib/imports/assemble";
import { columnsOf, suggestMapping } from "@/lib/imports/columns-of";
import { CsvSplitter } from "@/lib/imports/csv-splitter";
import { unitOf } from "@/lib/imports/fields";
import { isMissing, parseNumber } from "@/lib/imports/parse-number";
import { TimeParser, type TimeFormat } from "@/lib/imports/parse-time";
import { HeadReader } from "@/lib/imports/read-head";
import { PLACE, RowReader, type RowError } from "@/lib/imports/row-reader";
import { formatSchema, mappingSchema } from "@/lib/imports/schema";
import { sniffDelimiter, sniffEncoding } from "@/lib/imports/sniff";
import { suggestFormat } from "@/lib/imports/suggest-format";
import { textRows } from "@/lib/imports/text-rows";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { KIND } from "@/lib/readings/reading";

const now = new Date("2026-05-14T12:00:00Z");

/** Goes through a text as an import does. */
function read(text: string, given: { mapping?: object; format?: object } = {}) {
  const format = formatSchema.parse(given.format ?? {});
  const head = new HeadReader(format);
  const items: Item[] = [];
  const errors: RowError[] = [];
  let assembler: Assembler | undefined;
  const splitter = new CsvSplitter(format.delimiter ?? sniffDelimiter(text));
  for (const row of [...splitter.push(text), ...splitter.end()]) {
    if (head.isData(row)) assembler?.push(row);
    else if (row === head.header) {
      const columns = columnsOf(row.cells, mappingSchema.parse(given.mapping ?? {}), format);
      if ("errors" in columns) return { items, errors, columnErrors: columns.errors };
      assembler = new Assembler(new RowReader(columns, format, { now }), format.decimal, { item: (item) => items.push(item), error: (error) => errors.push(error) });
    }
  }
  assembler?.end();
  return { items, errors, columnErrors: [] };
}

const one = ({ items: [item] }: ReturnType<typeof read>) => ({ at: new Date(item.at).toISOString(), medium: item.medium, f0Hz: item.numbers[PLACE.f0Hz], q: item.numbers[PLACE.q], temperatureC: item.numbers[PLACE.temperatureC] });

describe("numbers", () => {
  it("reads what was written, in either decimal sign", () => {
    fc.assert(
      fc.property(fc.double({ noNaN: true, noDefaultInfinity: true }), (value) => {
        expect(parseNumber(String(value), ".")).toBe(value + 0);
        expect(parseNumber(String(value).replace(".", ","), ",")).toBe(value + 0);
      }),
    );
  });

  it("takes groups of digits and either minus, and nothing that only a program would", () => {
    expect(parseNumber("1 234.567 8", ".")).toBe(1234.5678);
    expect(parseNumber("2\u202f400,5", ",")).toBe(2400.5);
    expect(parseNumber("\u22125", ".")).toBe(-5);
    for (const text of ["0x10", "Infinity", "1e", "", " ", "12abc", "=1+1", "1,5", "1.2.3", "--5"]) expect(parseNumber(text, "."), text).toBeNaN();
    expect(parseNumber("1.234,5", ",")).toBeNaN();
  });

  it("knows the words for no value", () => {
    for (const text of ["", " ", "NaN", "nan", "N/A", "-", "null"]) expect(isMissing(text), text).toBe(true);
    for (const text of ["0", "-1", "abc", "none of it"]) expect(isMissing(text), text).toBe(false);
  });
});

describe("units", () => {
  it.each([
    ["f0Hz", "kHz", 2.4, 2400],
    ["f0Hz", "ms (period)", 0.5, 2000],
    ["temperatureC", "K", 293.15, 20],
    ["temperatureC", "°F", 68, 20],
    ["pressurePa", "hPa", 1013.25, 101325],
    ["q", "1/Q in ppm", 500, 2000],
    ["q", "damping ratio", 0.00025, 2000],
    ["q", "Hz (bandwidth)", 1.2, 2000],
    ["f0StdHz", "ppm", 0.5, 0.0012],
  ] as const)("%s in %s", (field, unit, value, ours) => {
    expect(unitOf(field, unit).to(value, 2400)).toBeCloseTo(ours, 9);
  });
});

describe("times", () => {
  const parse = (format: TimeFormat, zone: string, text: string) => {
    const parsed = new TimeParser(format, zone).parse(text, Number);
    return "ms" in parsed ? new Date(parsed.ms).toISOString() : parsed.reason;
  };

  it.each([
    ["iso", "UTC", "2026-05-14T06:18:00Z", "2026-05-14T06:18:00.000Z"],
    ["iso", "Europe/Berlin", "2026-05-14 06:18:00.25", "2026-05-14T04:18:00.250Z"],
    ["iso", "Europe/Berlin", "2026-05-14T06:18:00+05:30", "2026-05-14T00:48:00.000Z"],
    ["iso", "America/New_York", "2026-01-14", "2026-01-14T05:00:00.000Z"],
    ["dayFirst", "Europe/Berlin", "14.05.2026 06:18", "2026-05-14T04:18:00.000Z"],
    ["dayFirst", "UTC", "14/05/2026 06:18:07,5", "2026-05-14T06:18:07.500Z"],
    ["monthFirst", "UTC", "5/14/2026 12:05:00 AM", "2026-05-14T00:05:00.000Z"],
    ["monthFirst", "UTC", "5/14/2026 6:18 pm", "2026-05-14T18:18:00.000Z"],
    ["unixS", "Europe/Berlin", "1778739480.5", "2026-05-14T06:18:00.500Z"],
    ["unixMs", "UTC", "1778739480500", "2026-05-14T06:18:00.500Z"],
    // 1 January 1904 is day 0 of that clock, 126 years and 31 leap days before 2030.
    ["since1904", "UTC", String((Date.UTC(2026, 4, 14) - Date.UTC(1904, 0, 1)) / 1000), "2026-05-14T00:00:00.000Z"],
    // Day 25569 is 1 January 1970.
    ["days1900", "UTC", "25569.25", "1970-01-01T06:00:00.000Z"],
    ["days1900", "Europe/Berlin", "46156.5", "2026-05-14T10:00:00.000Z"],
  ] as const)("%s in %s: %s", (format, zone, text, instant) => {
    expect(parse(format, zone, text)).toBe(instant);
  });

  it.each([
    ["iso", "14.05.2026 06:18", "not a time of the form chosen"],
    ["iso", "2026-02-30 06:18", "no such day"],
    ["dayFirst", "05/14/2026 06:18", "no such day"],
    ["iso", "2026-05-14 24:00", "no such time of day"],
    ["monthFirst", "5/14/2026 13:00 PM", "no such time of day"],
    ["iso", "=NOW()", "not a time of the form chosen"],
    ["unixS", "yesterday", "not a number"],
  ] as const)("%s refuses %s", (format, text, reason) => {
    expect(parse(format, "UTC", text)).toContain(reason);
  });

  it("says that a local time in the gap of spring does not exist", () => {
    expect(parse("iso", "Europe/Berlin", "2026-03-29 02:30:00")).toMatch(/does not exist in Europe\/Berlin/);
  });

  it("takes the doubled hour of autumn once for each time that the clock showed it", () => {
    const parser = new TimeParser("iso", "Europe/Berlin");
    const texts = ["01:59", "02:00", "02:30", "02:59", "02:00", "02:30", "02:59", "03:00"];
    const at = texts.map((text) => parser.parse(`2025-10-26 ${text}:00`, Number)).map((parsed) => ("ms" in parsed ? new Date(parsed.ms).toISOString().slice(11, 16) : parsed.reason));
    expect(at).toEqual(["23:59", "00:00", "00:30", "00:59", "01:00", "01:30", "01:59", "02:00"]);
  });
});

describe("values", () => {
  it("reads columns by our names, in any order and case, and leaves out the others", () => {
    const found = read("Q,f0hz,note,MEDIUM,takenAt\n1800,2400.5,x,Air,2026-05-01T00:00:00Z\n");
    expect(one(found)).toMatchObject({ at: "2026-05-01T00:00:00.000Z", medium: "air", f0Hz: 2400.5, q: 1800, temperatureC: NaN });
  });

  it("reads a German file with its own names and units", () => {
    const found = read("# Messung\n\nZeit;Medium;f (kHz);Guete;T (K)\n14.05.2026 06:18:00;Sole;2,4005;1800,5;293,15\n", {
      mapping: { Zeit: "takenAt", "f (kHz)": { field: "f0Hz", unit: "kHz" }, Guete: "q", "T (K)": { field: "temperatureC", unit: "K" } },
      format: { decimal: ",", timeFormat: "dayFirst", timeZone: "Europe/Berlin" },
    });
    expect(found.errors).toEqual([]);
    expect(one(found)).toEqual({ at: "2026-05-14T04:18:00.000Z", medium: "Sole", f0Hz: 2400.5, q: 1800.5, temperatureC: 20 });
  });

  it("leaves out lines between the header and the first line with values", () => {
    const { items, errors } = read("run 7\ntakenAt,medium,f0Hz,q\n-,-,Hz,1\n2026-05-01,air,2400,1800\n", { format: { headerLine: 2, firstLine: 4 } });
    expect(errors).toEqual([]);
    expect(items.map(({ line }) => line)).toEqual([4]);
  });

  it("names line, column and reason of every bad cell", () => {
    const { errors } = read(["takenAt,medium,f0Hz,q,temperatureC,cycle", "2026-05-01,air,2400,1800,20,1", "2026-05-41,air,-5,1800,20,1", "2026-05-01,,abc,,-300,1.5", "2026-05-01,air", "2030-01-01,air,\"2400,5\",1800,20,1"].join("\n"));
    expect(errors.map(({ line, column, message }) => `${line} ${column}: ${message}`)).toEqual([
      "3 takenAt: “2026-05-41”: there is no such day",
      "3 f0Hz: “-5” must be above 0",
      "4 medium: names no medium",
      "4 f0Hz: “abc” is not a number",
      "4 cycle: “1.5” is not a whole number",
      "4 temperatureC: “-300” lies outside of -273.15 to 5000",
      "4 q: has no value",
      "5 : has 2 cells where the header's columns need 6",
      "6 takenAt: “2030-01-01” lies in the future",
      "6 f0Hz: “2400,5” is not a number; is the comma its decimal sign?",
    ]);
  });

  it("keeps a row without f0 as a failed repeat only where told to", () => {
    const text = "takenAt,medium,f0Hz,q\n2026-05-01,air,NaN,\n";
    expect(read(text).errors.map(({ message }) => message)).toEqual(["has no value", "has no value"]);
    expect(read(text, { format: { gaps: "keep" } })).toMatchObject({ errors: [], items: [{ medium: "air" }] });
  });

  it("says which columns are missing, and which names of the mapping are not in the file", () => {
    expect(read("takenAt,f0Hz\n", { mapping: { Freq: "q" } }).columnErrors.map(({ path }) => path)).toEqual(["mapping.Freq", "medium", "q"]);
    expect(read("a,b\n", { mapping: { a: "f0Hz", b: "f0Hz" } }).columnErrors.map(({ message }) => message)).toContain("“a” is f0Hz already");
  });
});

describe("raw sweeps", () => {
  const frequencyHz = linearGrid(2390, 2410, 21);
  const re = Array.from(frequencyHz, (hz) => Math.sin(hz));
  const im = Array.from(frequencyHz, (hz) => Math.cos(hz));

  it("are the same from one line a sweep and from one line a point", () => {
    const wide = read(`takenAt,medium,startHz,stopHz,re,im\n2026-05-01T00:00:00Z,air,2390,2410,${re.join(" ")},${im.join(" ")}\n`);
    const long = read(`takenAt,medium,frequencyHz,re,im\n${re.map((value, i) => `2026-05-01T00:00:00Z,air,${frequencyHz[i]},${value},${im[i]}`).join("\n")}\n`);
    expect([...wide.errors, ...long.errors]).toEqual([]);
    const [a, b] = [wide, long].map(({ items: [item] }) => item.record?.());
    expect(a).toEqual({ kind: KIND.complex, startHz: 2390, stopHz: 2410, points: 21, data: Float64Array.from([...re, ...im]) });
    expect(b).toEqual(a);
  });

  it("keep frequencies that are not evenly spaced, and voltages in volts", () => {
    const uneven = Array.from({ length: 11 }, (_, i) => 2400 + i * i);
    const { items, errors } = read(`t;f;R\n${uneven.map((hz, i) => `2026-05-01;${hz};${i}`).join("\n")}\n`, { mapping: { t: "takenAt", f: "frequencyHz", R: { field: "magnitude", unit: "mV" } }, format: { medium: "air" } });
    expect(errors).toEqual([]);
    expect(items[0].record?.()).toEqual({ kind: KIND.magnitude, points: 11, data: Float64Array.from([...uneven, ...uneven.map((_, i) => i / 1000)]) });
  });

  it("begin anew with the time, and say what is wrong with one", () => {
    const point = (time: string, i: number, value: string | number = 1) => `${time},air,${2400 + i},${value},0`;
    const points = Array.from({ length: 11 }, (_, i) => i);
    const text = ["takenAt,medium,frequencyHz,re,im", ...points.map((i) => point("2026-05-01T00:00:00Z", i)), ...points.slice(0, 5).map((i) => point("2026-05-01T00:00:10Z", i)), ...points.map((i) => point("2026-05-01T00:00:20Z", i, i === 3 ? "x" : 1))].join("\n");
    const { items, errors } = read(text);
    expect(items).toHaveLength(1);
    expect(errors.map(({ line }) => line)).toEqual([13, 21, 18]);
    expect(errors[0].message).toContain("at least 11 points, this one has 5");
  });

  it("refuse lists that are no numbers, of other lengths or too short", () => {
    const row = (a: string, b: string) => read(`takenAt,medium,startHz,stopHz,re,im\n2026-05-01,air,2390,2410,${a},${b}\n`).errors.map(({ message }) => message);
    expect(row("1 2 x", "1 2 3")).toEqual(["value 3, “x”, is not a number"]);
    expect(row("1 2 3", "1 2 3")).toEqual(["a sweep has 11 to 4001 points, this one has 3"]);
    expect(row(re.join(" "), im.slice(1).join(" "))).toEqual(["has 20 values where re has 21"]);
  });
});

describe("how a file is written", () => {
  it("finds the delimiter that parts the lines evenly", () => {
    expect(sniffDelimiter("a;b;c\n1,5;2,5;3\n1,5;2,5;3\n")).toBe(";");
    expect(sniffDelimiter("a\tb\n1,2\t3\n")).toBe("\t");
    expect(sniffDelimiter('"x;y",b\n1,2\n')).toBe(",");
  });

  it("finds the encoding, and reads a text in each", async () => {
    const text = "time,T (°C)\n1,2\n";
    const bytes = { "utf-8": new TextEncoder().encode(text), "windows-1252": Uint8Array.from(text, (letter) => letter.charCodeAt(0)), "utf-16le": new Uint8Array(Buffer.from(`\ufeff${text}`, "utf16le")) };
    for (const [encoding, encoded] of Object.entries(bytes)) {
      expect(sniffEncoding(encoded, true)).toBe(encoding);
      const rows = [];
      for await (const batch of textRows((async function* () { yield encoded; })(), {})) rows.push(...batch);
      expect(rows.map(({ cells }) => cells)).toEqual([["time", "T (°C)"], ["1", "2"]]);
    }
  });

  it("refuses what is no text", async () => {
    const all = async (bytes: Uint8Array) => {
      for await (const batch of textRows((async function* () { yield bytes; })(), { encoding: "utf-8" })) expect(batch).toBeDefined();
    };
    await expect(all(Uint8Array.of(97, 10, 0xff, 0xfe))).rejects.toThrow(/no utf-8/);
    await expect(all(Uint8Array.of(97, 10, 0, 97))).rejects.toThrow(/NUL/);
  });

  it("suggests a mapping from usual names and units in them", () => {
    expect(suggestMapping(["Timestamp", "f0 (kHz)", "Q-factor", "Temperature [K]", "Liquid", "Cycle", "comment"])).toEqual({
      Timestamp: { field: "takenAt" },
      "f0 (kHz)": { field: "f0Hz", unit: "kHz" },
      "Q-factor": { field: "q", unit: "1" },
      "Temperature [K]": { field: "temperatureC", unit: "K" },
      Liquid: { field: "medium" },
      Cycle: { field: "cycle" },
    });
  });
});

describe("suggestFormat", () => {
  const beginning = (header: string, ...lines: string[]) => ({ header: { line: 1, cells: header.split(";") }, rows: lines.map((line, i) => ({ line: i + 2, cells: line.split(";") })), whole: true });
  const suggest = (header: string, ...lines: string[]) => suggestFormat(beginning(header, ...lines), suggestMapping(header.split(";")), now);

  it.each([
    ["time;f0;q", "2026-05-01 08:00;2400.5;1800", { decimal: ".", timeFormat: "iso" }],
    ["time;f0;q", "01.05.2026 08:00;2400,5;1800", { decimal: ",", timeFormat: "dayFirst" }],
    ["time;f0;q", "5/13/2026 8:00 AM;2400.5;1800", { decimal: ".", timeFormat: "monthFirst" }],
    ["time;f0;q", "1777622400.25;2400.5;1800", { decimal: ".", timeFormat: "unixS" }],
    ["time;f0;q", "1777622400250;2400.5;1800", { decimal: ".", timeFormat: "unixMs" }],
    ["time;f0;q", "46143.5;2400.5;1800", { decimal: ".", timeFormat: "days1900" }],
    ["time;f0;q", "soon;2400.5;1800", { decimal: ".", timeFormat: "iso" }],
  ])("%s: %s", (header, line, format) => {
    expect(suggest(header, line)).toEqual(format);
  });

  it("takes a bare T in degrees for a temperature", () => {
    expect(suggestMapping(["t", "T (K)"])).toEqual({ t: { field: "takenAt" }, "T (K)": { field: "temperatureC", unit: "K" } });
  });
});
