import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { CsvSplitter, MOST_CHARACTERS_A_ROW } from "@/lib/imports/csv-splitter";

const split = (text: string, delimiter = ",", cuts: readonly number[] = []) => {
  const splitter = new CsvSplitter(delimiter);
  const places = [0, ...cuts.map((cut) => cut % (text.length + 1)).sort((a, b) => a - b), text.length];
  const rows = places.slice(1).flatMap((to, i) => splitter.push(text.slice(places[i], to)));
  return [...rows, ...splitter.end()];
};

const cellsOf = (text: string, delimiter?: string) => split(text, delimiter).map(({ cells }) => cells);

/** RFC 4180, 2.5 to 2.7. */
const written = (cell: string) => (/[",;\t|\r\n]/.test(cell) ? `"${cell.replaceAll('"', '""')}"` : cell);

describe("CsvSplitter", () => {
  it("reads the forms of RFC 4180, section 2", () => {
    expect(cellsOf("aaa,bbb,ccc\r\nzzz,yyy,xxx\r\n")).toEqual([["aaa", "bbb", "ccc"], ["zzz", "yyy", "xxx"]]);
    expect(cellsOf("aaa,bbb,ccc\r\nzzz,yyy,xxx")).toEqual([["aaa", "bbb", "ccc"], ["zzz", "yyy", "xxx"]]);
    expect(cellsOf('"aaa","b\r\nbb","ccc"\r\nzzz,yyy,xxx')).toEqual([["aaa", "b\r\nbb", "ccc"], ["zzz", "yyy", "xxx"]]);
    expect(cellsOf('"aaa","b""bb","ccc"')).toEqual([["aaa", 'b"bb', "ccc"]]);
  });

  it("names the line on which a row begins, also behind cells with line ends and blank lines", () => {
    expect(split('a,b\n"1\n2\n3",x\n\ny,z\n').map(({ line }) => line)).toEqual([1, 2, 6]);
  });

  it("takes a quote within a cell for text", () => {
    expect(cellsOf('5" wire,x\n6,y')).toEqual([['5" wire', "x"], ["6", "y"]]);
    expect(cellsOf('a"b"c,"d"')).toEqual([['a"b"c', "d"]]);
  });

  it("ends lines with CR where told to", () => {
    const splitter = new CsvSplitter(";", "\r");
    expect([...splitter.push("a;b\rc"), ...splitter.push(";d\r"), ...splitter.end()]).toEqual([{ line: 1, cells: ["a", "b"] }, { line: 2, cells: ["c", "d"] }]);
  });

  it("reads back what was written by RFC 4180, wherever the pieces are cut", () => {
    const cell = fc.string({ unit: fc.constantFrom("a", "7", " ", '"', ",", ";", "\n", "\r\n", "é", "€") });
    const table = fc.array(fc.array(cell, { minLength: 2, maxLength: 5 }), { minLength: 1, maxLength: 6 });
    fc.assert(
      fc.property(table, fc.constantFrom(",", ";", "\t"), fc.constantFrom("\n", "\r\n"), fc.array(fc.nat(), { maxLength: 8 }), (rows, delimiter, end, cuts) => {
        const text = rows.map((cells) => cells.map(written).join(delimiter) + end).join("");
        const kept = rows.filter((cells) => cells.map(written).join(delimiter).trim() !== "");
        expect(split(text, delimiter, cuts).map(({ cells }) => cells)).toEqual(kept);
        let line = 1;
        const lines = rows.flatMap((cells) => {
          const own = line;
          line += 1 + cells.join("").split("\n").length - 1;
          return cells.map(written).join(delimiter).trim() === "" ? [] : [own];
        });
        expect(split(text, delimiter, cuts).map(({ line: of }) => of)).toEqual(lines);
      }),
    );
  });

  it("gives up on a row without end instead of keeping all of it", () => {
    expect(() => new CsvSplitter(",").push(`"${"x".repeat(MOST_CHARACTERS_A_ROW + 1)}`)).toThrow(/line 1 has no end .* quotation mark/);
  });
});
