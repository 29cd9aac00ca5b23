import { describe, expect, it } from "vitest";
import { moveCursor, placeAt, placeInWords, traceAt, type StripPlace } from "@/components/strip/strip-cursor";
import type { StripSegment } from "@/components/strip/strip-input";

const at = (hours: number) => new Date(Date.UTC(2026, 4, 4) + hours * 3_600_000).toISOString();
const segments: StripSegment[] = [
  { kind: "air", from: at(0), to: at(12), cycle: 1, label: "Air reference", repeats: 120 },
  { kind: "fill", from: at(12), to: at(13), cycle: 1, label: "Fill" },
  { kind: "liquid", from: at(13), to: at(43), cycle: 1, label: "Water", letter: "W", tint: 1, repeats: 300 },
  { kind: "clean", from: at(43), to: at(45), cycle: 1, label: "Clean" },
  { kind: "air", from: at(45), to: at(57), cycle: 2, label: "Air reference", repeats: 120, planned: true },
];
const go = (place: StripPlace | undefined, ...moves: Parameters<typeof moveCursor>[2][]) => moves.reduce<StripPlace | undefined>((here, move) => moveCursor(segments, here, move), place);

describe("the cursor of a strip", () => {
  it("steps over phases only, not over fills and cleans", () => {
    expect(go(undefined, "first")?.index).toBe(0);
    expect(go(undefined, "first", "phase after")?.index).toBe(2);
    expect(go(undefined, "first", "phase after", "phase after")?.index).toBe(4);
    expect(go(undefined, "last", "phase before")?.index).toBe(2);
  });
  it("stays at the ends", () => {
    expect(go(undefined, "last", "phase after")).toEqual(go(undefined, "last"));
    expect(go({ index: 0, at: Date.parse(at(0)), repeat: 1 }, "repeat before")).toMatchObject({ index: 0, repeat: 1 });
  });
  it("steps by repeat and goes over into the next phase", () => {
    const last = { index: 0, at: Date.parse(at(11.95)), repeat: 120 };
    expect(go(last, "repeat after")).toMatchObject({ index: 2, repeat: 1 });
    expect(go(last, "repeat after", "repeat before")).toMatchObject({ index: 0, repeat: 120 });
    expect(go(last, "repeat before")).toMatchObject({ index: 0, repeat: 119, at: Date.parse(at(11.85)) });
  });
  it("finds segment and repeat of a time", () => {
    expect(placeAt(segments, Date.parse(at(8.1)))).toMatchObject({ index: 0, repeat: 82 });
    expect(placeAt(segments, Date.parse(at(12)))?.index).toBe(1);
    expect(placeAt(segments, Date.parse(at(57)))).toBeUndefined();
    expect(moveCursor([], undefined, "first")).toBeUndefined();
  });
  it("says where it is", () => {
    expect(placeInWords(segments, { index: 0, at: 0, repeat: 81 })).toBe("cycle 1, air reference, repeat 81 of 120");
    expect(placeInWords(segments, { index: 2, at: 0, repeat: 1 })).toBe("cycle 1, Water, repeat 1 of 300");
    expect(placeInWords(segments, { index: 4, at: 0 })).toBe("cycle 2, air reference, planned");
  });
  it("reads the trace only inside an air phase that was measured", () => {
    const input = { from: at(0), to: at(57), segments, trace: [{ at: at(1), value: 1 }, { at: at(8), value: 8 }, { at: at(50), value: 50 }] };
    expect(traceAt(input, { index: 0, at: Date.parse(at(6)) })?.value).toBe(8);
    expect(traceAt(input, { index: 2, at: Date.parse(at(20)) })).toBeUndefined();
    expect(traceAt(input, { index: 4, at: Date.parse(at(50)) })).toBeUndefined();
  });
});
