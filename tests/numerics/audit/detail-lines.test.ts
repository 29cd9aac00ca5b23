import { describe, expect, test } from "vitest";
import { detailLines, fieldInWords } from "@/lib/audit/detail-lines";

const NAMES: Record<string, string> = { "rig 7": "North bench", "lot 9": "Brine, B-35", "campaign 118": "C-118 Ageing", "campaign 119": "C-119 Three fills", "version 4": "Three fills, version 2" };
const lines = (action: string, detail: Record<string, unknown>) =>
  detailLines(action, detail, (kind, id) => NAMES[`${kind} ${id}`]).map(({ field, from, to }) => `${field ? `${field}: ` : ""}${from === undefined ? "" : `${from} → `}${to}`);

describe("a field in words", () => {
  test.each([["wasteCapacityMl", "waste capacity / mL"], ["nominalF0Hz", "nominal f0 / Hz"], ["rigId", "rig"], ["retiredAt", "retired"], ["timeZone", "time zone"], ["radiusM", "radius / m"], ["flashPointC", "flash point / °C"], ["name", "name"]])("%s", (field, words) =>
    expect(fieldInWords(field)).toBe(words),
  );
});

describe("an event in lines", () => {
  test("what was changed stands before and after, also where it was or became empty", () => {
    expect(lines("update", { before: { wasteCapacityMl: 5000, note: null, retiredAt: null }, after: { wasteCapacityMl: 10000, note: "Rewound", retiredAt: "2026-05-14T08:00:00.000Z" } })).toEqual([
      "waste capacity / mL: 5\u2009000 → 10\u2009000",
      "note: – → Rewound",
      "retired: – → 2026-05-14T08:00:00.000Z",
    ]);
  });

  test("a change without a name is called by its action", () => {
    expect(lines("rename", { from: "A", to: "B" })).toEqual(["name: A → B"]);
    expect(lines("rename", { before: "A", after: "B" })).toEqual(["name: A → B"]);
    expect(lines("change role", { from: "viewer", to: "operator" })).toEqual(["role: viewer → operator"]);
  });

  test("a span of time is no change", () => {
    expect(lines("block time", { from: "2026-06-03T06:00:00.000Z", to: "2026-06-03T14:00:00.000Z", why: "Service" })).toEqual(["from: 2026-06-03T06:00:00.000Z", "to: 2026-06-03T14:00:00.000Z", "why: Service"]);
  });

  test("ids stand as names, and as they are where nothing is known of them", () => {
    expect(lines("load", { port: 1, lotId: "9", volumeMl: 500, how: "replace", confirm: false })).toEqual(["port: 1", "lot: Brine, B-35", "volume / mL: 500", "how: replace", "confirm: no"]);
    expect(lines("take over", { campaignId: "555", why: undefined })).toEqual(["campaign: 555"]);
    expect(lines("update", { priority: { from: 0, to: 3 }, madeWayFor: "118" })).toEqual(["priority: 0 → 3", "made way for: C-118 Ageing"]);
    expect(lines("move in line", { before: "119", line: ["118", "119"] })).toEqual(["before: C-119 Three fills", "line: C-118 Ageing, C-119 Three fills"]);
    expect(lines("mount", { mountId: "3", rigId: "7" })).toEqual(["rig: North bench"]);
  });

  test("what is nested is said in one line, never as JSON", () => {
    expect(lines("create", { protocolVersionId: "4", slots: { sample: { port: 2, lotId: "9" } }, table: [{ a: 1 }, { a: 2 }], hazards: { ghs: ["H225", "H319"], notWith: [] } })).toEqual([
      "protocol version: Three fills, version 2",
      "slots: sample port 2, lot Brine, B-35",
      "table: 2 entries",
      "hazards: ghs H225, H319, not with –",
    ]);
  });

  test("a campaign put behind all others stands before none", () => expect(lines("move in line", { before: null, line: ["118"] })).toEqual(["line: C-118 Ageing"]));
});
