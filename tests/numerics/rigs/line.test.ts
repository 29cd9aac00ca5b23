import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { afterBlocked, placeInLine, type Waiting } from "@/lib/rigs/line";

const HOUR = 3_600_000;
const at = (h: number) => h * HOUR;
const free = (h: number, slack = 0) => ({ at: at(h), earliest: at(h - slack), latest: at(h + slack) });
const campaign = (id: string, hours: number, startH: number | null = null): Waiting => ({ id, startAt: startH === null ? null : at(startH), seconds: hours * 3600, lowS: (hours - 1) * 3600, highS: (hours + 1) * 3600 });

describe("the line of a rig", () => {
  test("one follows the other from when the rig is free, and ranges add up", () => {
    expect(placeInLine({ free: free(10, 2), waiting: [campaign("a", 5), campaign("b", 3)], blocked: [] })).toEqual([
      { id: "a", from: at(10), end: { at: at(15), earliest: at(12), latest: at(18) } },
      { id: "b", from: at(15), end: { at: at(18), earliest: at(14), latest: at(22) } },
    ]);
  });

  test("one that may begin only later lets the next pass, and comes when the rig is free after its start", () => {
    const placed = placeInLine({ free: free(0), waiting: [campaign("later", 4, 6), campaign("now", 8)], blocked: [] });
    expect(placed.map(({ id, from }) => [id, from / HOUR])).toEqual([["now", 0], ["later", 8]]);
  });

  test("when all begin later the rig waits for the first to come due", () => {
    const placed = placeInLine({ free: free(0), waiting: [campaign("c", 1, 9), campaign("d", 1, 5)], blocked: [] });
    expect(placed.map(({ id, from }) => [id, from / HOUR])).toEqual([["d", 5], ["c", 9]]);
  });

  test("none begins in blocked time, one that has begun runs on through it", () => {
    const placed = placeInLine({ free: free(10), waiting: [campaign("a", 5), campaign("b", 2)], blocked: [{ from: at(9), to: at(12) }, { from: at(13), to: at(14) }] });
    expect(placed.map(({ from, end }) => [from / HOUR, end.at / HOUR])).toEqual([[12, 17], [17, 19]]);
  });

  test("a start inside blocked time waits for its end", () => {
    const [only] = placeInLine({ free: free(0), waiting: [campaign("a", 1, 5)], blocked: [{ from: at(4), to: at(8) }] });
    expect(only.from).toBe(at(8));
  });

  test("an empty line places nothing", () => expect(placeInLine({ free: free(0), waiting: [], blocked: [] })).toEqual([]));

  test("whatever the line: everybody is placed once, none overlap, none begins early or in blocked time, ends lie in their range", () => {
    const waiting = fc.array(fc.record({ hours: fc.integer({ min: 1, max: 200 }), start: fc.option(fc.integer({ min: 0, max: 300 })) }), { maxLength: 8 });
    const blocked = fc.array(fc.record({ from: fc.integer({ min: 0, max: 300 }), length: fc.integer({ min: 1, max: 60 }) }), { maxLength: 4 });
    fc.assert(
      fc.property(waiting, blocked, (made, windows) => {
        const line = made.map(({ hours, start }, i) => campaign(String(i), hours, start));
        const closed = windows.map(({ from, length }) => ({ from: at(from), to: at(from + length) }));
        const placed = placeInLine({ free: free(0, 1), waiting: line, blocked: closed });
        expect(placed.map(({ id }) => id).toSorted()).toEqual(line.map(({ id }) => id).toSorted());
        placed.forEach(({ id, from, end }, i) => {
          expect(from).toBeGreaterThanOrEqual(Math.max(placed[i - 1]?.end.at ?? 0, line[Number(id)].startAt ?? 0));
          expect(closed.some((window) => window.from <= from && from < window.to)).toBe(false);
          expect(end.earliest).toBeLessThanOrEqual(end.at);
          expect(end.latest).toBeGreaterThanOrEqual(end.at);
        });
      }),
    );
  });
});

test("blocked times that touch or overlap are passed together", () => {
  const windows = [{ from: 0, to: 10 }, { from: 5, to: 12 }, { from: 12, to: 20 }];
  expect(afterBlocked(3, windows)).toBe(20);
  expect(afterBlocked(20, windows)).toBe(20);
});
