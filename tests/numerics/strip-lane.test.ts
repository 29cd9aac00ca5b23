import { describe, expect, test } from "vitest";
import { layoutLane, type LaneInput } from "@/components/strip/lane-geometry";
import type { StripSegment } from "@/components/strip/strip-input";
import type { StripSegment as Stored } from "@/lib/campaigns/strip-schema";
import { laneSegments } from "@/lib/rigs/lane-segments";

const day = (n: number) => new Date(Date.UTC(2026, 4, 1) + n * 86_400_000).toISOString();
const liquid = (from: number, to: number): StripSegment => ({ kind: "liquid", from: day(from), to: day(to), planned: true, label: "Water", letter: "W", tint: 1 });
const lane: LaneInput = { from: day(0), to: day(10), now: day(2), runs: [], blocked: [] };

describe("a lane of ten days on 1000 px", () => {
  test("runs, their ranges and blocked time stand where their times are", () => {
    const { runs, blocked, nowX } = layoutLane(
      { ...lane, runs: [{ key: "a", segments: [liquid(3, 5)], from: day(3), to: day(5), range: { earliest: day(4.5), latest: day(6) } }], blocked: [{ id: "1", from: day(7), to: day(8), why: "pump service" }] },
      1000,
    );
    expect(nowX).toBe(200);
    expect(runs[0]).toMatchObject({ x0: 300, x1: 500, whisker: { x0: 450, x1: 600, cutLeft: false, cutRight: false } });
    expect(blocked[0]).toMatchObject({ x0: 700, x1: 800, hasRoom: true });
  });

  test("a name reaches to the next run and no further, and one without room is left out", () => {
    const run = (key: string, from: number, to: number) => ({ key, segments: [liquid(from, to)], from: day(from), to: day(to) });
    const { runs } = layoutLane({ ...lane, runs: [run("a", 1, 4), run("b", 4, 4.2), run("c", 4.2, 9)] }, 1000);
    expect(runs.map(({ nameWidth }) => nameWidth)).toEqual([294, 0, 574]);
  });

  test("what lies wholly outside is not drawn; a range that leaves the window is cut without an end", () => {
    const { runs, blocked } = layoutLane(
      {
        ...lane,
        runs: [
          { key: "before", segments: [], from: day(-5), to: day(-1) },
          { key: "across", segments: [liquid(8, 12)], from: day(8), to: day(12), range: { earliest: day(9), latest: day(14) } },
          { key: "after", segments: [], from: day(12), to: day(14) },
        ],
        blocked: [{ id: "1", from: day(11), to: day(12), why: "later" }],
      },
      1000,
    );
    expect(runs.map(({ key }) => key)).toEqual(["across"]);
    expect(runs[0].whisker).toEqual({ x0: 900, x1: 1000, cutLeft: false, cutRight: true });
    expect(blocked).toEqual([]);
  });

  test("a ring is named where its name reaches into no other ring", () => {
    const { rings, height } = layoutLane({ ...lane, rings: [{ at: day(5), label: "mount" }, { at: day(5.1), label: "load W" }, { at: day(12), label: "waste" }] }, 1000);
    expect(rings).toEqual([{ x: 500, label: "mount", hasRoom: false }, { x: 510, label: "load W", hasRoom: true }]);
    expect(height).toBeGreaterThan(layoutLane(lane, 1000).height);
  });
});

describe("segments of a campaign in its lane", () => {
  const stored = (from: number, to: number, planned: boolean): Stored => ({ kind: "liquid", from: day(from), to: day(to), planned, cycle: 1, label: "Water" });
  const window = { fromMs: Date.parse(day(0)), toMs: Date.parse(day(100)) };

  test("what is planned is carried on at the pace of the expected end, what is past stays", () => {
    const drawn = laneSegments({ segments: [stored(1, 2, false), stored(2, 3, true), stored(3, 4, true)], endMs: Date.parse(day(6)), ...window, isCut: false });
    expect(drawn.map(({ from, to }) => [from, to])).toEqual([[day(1), day(2)], [day(2), day(4)], [day(4), day(6)], [day(6), day(6)]]);
    expect(drawn.at(-1)?.kind).toBe("end");
  });

  test("a plan that was cut keeps its own pace and goes on as a line", () => {
    const drawn = laneSegments({ segments: [stored(2, 3, true)], endMs: Date.parse(day(9)), ...window, isCut: true });
    expect(drawn.map(({ kind, from, to }) => [kind, from, to])).toEqual([["liquid", day(2), day(3)], ["wait", day(3), day(9)], ["end", day(9), day(9)]]);
  });

  test("only what the window shows is kept", () => {
    const drawn = laneSegments({ segments: [stored(-9, -8, false), stored(1, 2, true)], endMs: Date.parse(day(200)), ...window, isCut: true });
    expect(drawn.map(({ kind }) => kind)).toEqual(["liquid", "wait"]);
  });
});
