import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { layoutRuler, layoutWeeks } from "@/components/strip/ruler-geometry";
import { layoutStrip, timeScale } from "@/components/strip/strip-geometry";
import type { StripInput, StripSegment } from "@/components/strip/strip-input";
import { traceRange } from "@/components/strip/trace-geometry";

const start = Date.UTC(2026, 4, 4);
const at = (hours: number) => new Date(start + hours * 3_600_000).toISOString();

const cycle = (from: number, n: number, letter = "W", scale = 1): StripSegment[] => [
  { kind: "air", from: at(from), to: at(from + 8 * scale), cycle: n, label: "Air reference", repeats: 80 },
  { kind: "fill", from: at(from + 8 * scale), to: at(from + 8.4 * scale), cycle: n, label: "Fill" },
  { kind: "liquid", from: at(from + 8.4 * scale), to: at(from + 20 * scale), cycle: n, label: "Water", letter, tint: 1, repeats: 300 },
  { kind: "clean", from: at(from + 20 * scale), to: at(from + 22 * scale), cycle: n, label: "Clean" },
  { kind: "dry", from: at(from + 22 * scale), to: at(from + 24 * scale), cycle: n, label: "Dry" },
];
const strip = (extra: Partial<StripInput> = {}): StripInput => ({ from: at(0), to: at(48), now: at(36), segments: [...cycle(0, 1), ...cycle(24, 2)], ...extra });

describe("the run strip", () => {
  it("is linear in time", () => {
    const x = timeScale(at(0), at(48), 480);
    expect(x(at(0))).toBe(0);
    expect(x(at(12))).toBe(120);
    expect(x(at(60))).toBe(600);
    expect(() => timeScale(at(1), at(1), 480)).toThrow(RangeError);
  });

  it("fills the level for liquid, 0.6 of it for clean, and a line for air", () => {
    const { shapes, base, roof } = layoutStrip(strip(), 960, "campaign");
    const of = (kind: string) => shapes.find((shape) => shape.kind === kind)!;
    expect(base - roof).toBe(62);
    expect(of("liquid").d).toBe(`M168 ${roof}h232v62h-232z`);
    expect(of("clean").d).toBe(`M400 ${base - 37.2}h40v37.2h-40z`);
    expect(of("air").d).toBe(`M0 ${base - 1}H160`);
    expect(of("dry").d).toBe(`M440 ${base - 37.2}L480 ${base}H440Z`);
  });

  it("splits the phase that runs at now: solid before, planned after", () => {
    const liquids = layoutStrip(strip(), 960, "campaign").shapes.filter(({ kind }) => kind === "liquid");
    expect(liquids.map(({ x0, x1, planned }) => [x0, x1, planned])).toEqual([[168, 400, false], [648, 720, false], [720, 880, true]]);
  });

  it("keeps fill, clean and dry visible at any scale", () => {
    const shapes = layoutStrip(strip({ to: at(20_000), now: at(20_000), segments: cycle(0, 1) }), 600, "row").shapes;
    expect(shapes.find(({ kind }) => kind === "clean")?.d).toMatch(/h1\.5v/);
    expect(shapes.find(({ kind }) => kind === "dry")?.d).toBe("M0.7 22.4L2.7 32H0.7Z");
  });

  it("puts a letter only where it has room: 14 px, 12 in rows, 17 on a phone", () => {
    const letters = (hours: number, width: number, size: "row" | "today") =>
      layoutStrip({ from: at(0), to: at(100), segments: [{ kind: "liquid", from: at(0), to: at(hours), letter: "W", tint: 1, label: "Water" }] }, width, size).letters.length;
    expect(letters(2, 650, "row")).toBe(1);
    expect(letters(2, 550, "row")).toBe(0);
    expect(letters(2, 650, "today")).toBe(0);
    expect(letters(2, 700, "today")).toBe(1);
    expect(letters(4, 410, "today")).toBe(0);
    expect(letters(4, 430, "today")).toBe(1);
  });

  it("marks the halt where it happened and ends what is drawn where the agent fell silent", () => {
    const layout = layoutStrip(strip({ halt: { at: at(30), open: true }, silentSince: at(30) }), 960, "today");
    expect(layout.haltX).toBe(600);
    expect(layout.silentX).toBe(600);
    expect(Math.max(...layout.shapes.map(({ x1 }) => x1))).toBeLessThanOrEqual(600);
  });

  it("draws the end as a thin and a thick bar", () => {
    const layout = layoutStrip(strip({ segments: [{ kind: "end", from: at(24), to: at(24), label: "End" }] }), 480, "row");
    expect(layout.shapes).toHaveLength(1);
    expect(layout.shapes[0]?.line).toMatch(/^M236 /);
    expect(layout.shapes[0]?.d).toMatch(/^M239\.25 /);
  });

  it("never leaves its width, whatever is asked for", () => {
    fc.assert(
      fc.property(fc.integer({ min: -100, max: 100 }), fc.integer({ min: 1, max: 300 }), fc.integer({ min: 40, max: 1600 }), (from, hours, width) => {
        for (const { x0, x1 } of layoutStrip(strip({ from: at(from), to: at(from + hours) }), width, "today").shapes) {
          expect(x0).toBeGreaterThanOrEqual(0);
          expect(x1).toBeLessThanOrEqual(width);
        }
      }),
    );
  });
});

describe("short cycles", () => {
  const many = (letters: string) => [...letters].flatMap((letter, i) => cycle(i * 2.4, i + 1, letter, 0.1));
  const input = (letters: string): StripInput => ({ from: at(0), to: at(letters.length * 2.4), now: at(letters.length * 1.2), segments: many(letters) });

  it("become one block a liquid, solid to the share of time the cell is full", () => {
    const { blocks, shapes } = layoutStrip(input("W".repeat(150) + "B".repeat(150)), 900, "campaign");
    expect(blocks.map(({ letter, cycles }) => [letter, cycles])).toEqual([["W", 150], ["B", 150]]);
    expect(blocks[0]?.full).toBeCloseTo(11.6 / 24, 6);
    expect(shapes).toHaveLength(0);
  });
  it("are parted at now", () => {
    const [past, planned] = layoutStrip(input("W".repeat(150) + "B".repeat(150)), 900, "campaign").blocks;
    expect(past?.xNow).toBe(past?.x1);
    expect(planned?.xNow).toBe(planned?.x0);
  });
  it("are one block when the liquid changes with every cycle", () => {
    expect(layoutStrip(input("WP".repeat(100)), 900, "campaign").blocks.map(({ letter, cycles }) => [letter, cycles])).toEqual([["W, P", 200]]);
  });
  it("keep their shape from 8 px on", () => {
    expect(layoutStrip(input("W".repeat(100)), 800, "campaign").blocks).toHaveLength(0);
    expect(layoutStrip(input("W".repeat(100)), 799, "campaign").blocks).toHaveLength(1);
  });
});

describe("the trace under the strip", () => {
  it("shows never less than half the limit either way", () => {
    expect(traceRange([1, 2], 60)).toEqual([-34.8, 34.8].map((v) => expect.closeTo(v, 6)));
    const [low, high] = traceRange([-49.5, 0], 60);
    expect(low).toBeCloseTo(-49.5 - 0.08 * 79.5, 6);
    expect(high).toBeCloseTo(30 + 0.08 * 79.5, 6);
  });
  it("has a range without data, without a limit, and for one value", () => {
    expect(traceRange([], undefined)).toEqual([-1, 1]);
    const [low, high] = traceRange([5], undefined);
    expect(low).toBeLessThan(5);
    expect(high).toBeGreaterThan(5);
  });
  it("makes one piece an air phase and joins them only by a dotted line", () => {
    const trace = [1, 3, 5, 25, 27].map((hour) => ({ at: at(hour), value: hour }));
    const layout = layoutStrip(strip({ trace, limit: 60 }), 960, "campaign").trace!;
    expect(layout.phases.map(({ points }) => points.length)).toEqual([3, 2]);
    expect(layout.joins.match(/M/g)).toHaveLength(1);
    expect(layout.band?.width).toBe(720);
  });
  it("leaves out values that are none", () => {
    const layout = layoutStrip(strip({ trace: [{ at: at(1), value: Number.NaN }, { at: at(2), value: 1 }] }), 960, "campaign").trace!;
    expect(layout.phases[0]?.points).toHaveLength(1);
  });
});

describe("the day ruler", () => {
  const ruler = (days: number, width: number, now?: string) => layoutRuler({ from: "2026-05-03T22:00:00Z", to: new Date(Date.UTC(2026, 4, 3, 22) + days * 86_400_000).toISOString(), zone: "Europe/Berlin", now }, width);
  it("names Mondays with their month and shades weekends", () => {
    const days = ruler(14, 700);
    expect(days[0]?.label).toMatchObject({ text: "4 May", strong: true });
    expect(days[1]?.label).toMatchObject({ text: "5", strong: false });
    expect(days.map(({ weekend }) => weekend)).toEqual([false, false, false, false, false, true, true, false, false, false, false, false, true, true]);
  });
  it("labels every day from 30 px on, else every second, else Mondays", () => {
    const labels = (days: number, width: number) => ruler(days, width).filter(({ label }) => label).length;
    expect(labels(20, 600)).toBe(20);
    expect(ruler(20, 599).flatMap(({ label }) => label?.text ?? [])).toEqual(["5", "7", "9", "11 May", "13", "15", "17", "19", "21"]);
    expect(labels(20, 200)).toBe(3);
  });
  it("leaves room for the flag of the present", () => {
    const days = ruler(14, 700, "2026-05-06T10:00:00Z");
    expect(days[2]?.label).toBeUndefined();
    expect(days[5]?.label).toBeDefined();
  });
  it("draws a line a week from the start", () => {
    expect(layoutWeeks(at(0), at(35 * 24), 350).map(({ x, text }) => [x, text])).toEqual([[0, "Run"], [70, "1"], [140, "2"], [210, "3"], [280, "4"], [350, "5"]]);
  });
});
