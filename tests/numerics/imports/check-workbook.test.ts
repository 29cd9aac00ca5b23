import { describe, expect, it } from "vitest";
import { archiveEntries } from "@/lib/imports/archive-entries";
import { checkWorkbook } from "@/lib/imports/check-workbook";
import { workbookRows } from "@/lib/imports/workbook-rows";
import { workbookOf } from "../../factories/workbook";

describe("checkWorkbook", () => {
  const rows = Array.from({ length: 100 }, () => ["x".repeat(1000)]);

  it("lets pass what unpacks within bounds", () => {
    expect(() => checkWorkbook(workbookOf(rows))).not.toThrow();
    expect(archiveEntries(workbookOf(rows)).map(({ deflated }) => deflated)).toEqual(Array.from({ length: 6 }, () => true));
  });

  it("refuses what unpacks to more, whatever its directory states", () => {
    expect(() => checkWorkbook(workbookOf(rows, { statedSize: 10 }), 50_000)).toThrow(/unpacks to more than/);
  });

  it("refuses what is damaged or no archive", () => {
    const damaged = workbookOf(rows);
    damaged.fill(0xff, 60, 90);
    expect(() => checkWorkbook(damaged)).toThrow(/damaged/);
    expect(() => checkWorkbook(new Uint8Array(Buffer.from("PK\x03\x04")))).toThrow(/no workbook/);
    expect(() => checkWorkbook(new Uint8Array(100))).toThrow(/no workbook/);
  });
});

describe("workbookRows", () => {
  it("gives dates and numbers as text, and leaves out blank rows", async () => {
    const rows = await workbookRows(workbookOf([["t", "q"], [], [new Date("2026-05-14T06:18:00.250Z"), 0.1]]));
    expect(rows).toEqual([{ line: 1, cells: ["t", "q"] }, { line: 3, cells: ["2026-05-14 06:18:00.250", "0.1"] }]);
  });

  it("refuses an archive that is no workbook", async () => {
    await expect(workbookRows(new Uint8Array(Buffer.from("PK\x03\x04 and nothing")))).rejects.toThrow(/no workbook/);
  });
});
