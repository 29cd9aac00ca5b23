import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { tickDecimals } from "@/components/charts/axes";
import { bucketStretches, type Bucket } from "@/components/charts/bucket-columns";
import { logRange, noiseStretches, notMeasured, placeLabels, type DeviationPoint } from "@/components/charts/deviation";
import { tableAsCsv } from "@/components/charts/save";
import { decadeTicks, minorTicks, rangeOf, roundTicks } from "@/components/charts/ticks";
import { closedTimeAxis, timeTicks, trueTimeAxis } from "@/components/charts/time-axis";
import { nearestStop } from "@/components/charts/time-series-twin";

const start = Date.UTC(2026, 4, 4);
const at = (hours: number) => new Date(start + hours * 3_600_000).toISOString();
const ms = (hours: number) => start + hours * 3_600_000;
const bucket = (hour: number, mean: number, n = 1, spread = 0): Bucket => ({ from: at(hour), to: at(hour), mean, min: mean - spread, max: mean + spread, n });

describe("buckets to pixel columns", () => {
  const axis = trueTimeAxis(at(0), at(100), 0, 100);
  it("keeps the lowest, the highest and the mean weighted by repeats of each column", () => {
    const [columns] = bucketStretches([bucket(10, 1, 1, 5), bucket(10.2, 4, 3, 1)], axis.place);
    expect(columns).toEqual([{ x: 10, at: expect.closeTo(ms(10.15), 0), low: -4, high: 6, mean: 3.25, n: 4 }]);
  });
  it("parts stretches at the phases, however short the step between them", () => {
    const phases = [{ from: at(0), to: at(20) }, { from: at(20.5), to: at(60) }];
    const stretches = bucketStretches([bucket(18, 1), bucket(20, 1), bucket(21, 1), bucket(40, 1)], axis.place, phases);
    expect(stretches.map((columns) => columns.map(({ x }) => x))).toEqual([[18, 20], [21, 40]]);
  });
  it("parts stretches at gaps where no phases are known", () => {
    expect(bucketStretches([1, 2, 3, 8, 9].map((hour) => bucket(hour, 1)), axis.place).map((columns) => columns.length)).toEqual([3, 2]);
  });
  it("leaves out empty buckets and what has no mean", () => {
    expect(bucketStretches([bucket(1, Number.NaN), bucket(2, 1, 0), bucket(3, 1)], axis.place).flat()).toHaveLength(1);
    expect(bucketStretches([], axis.place)).toEqual([]);
  });
  it("loses no extreme, however many buckets share a column", () => {
    fc.assert(
      fc.property(fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 1, maxLength: 400 }), (values) => {
        const columns = bucketStretches(values.map((value, i) => bucket((i * 100) / values.length, value)), trueTimeAxis(at(0), at(100), 0, 20).place).flat();
        // Compared as numbers: which zero, +0 or −0, Math.min gives is no extreme lost.
        expect(Math.min(...columns.map(({ low }) => low)) - Math.min(...values)).toBeCloseTo(0, 12);
        expect(Math.max(...columns.map(({ high }) => high)) - Math.max(...values)).toBeCloseTo(0, 12);
        expect(columns.reduce((sum, { n }) => sum + n, 0)).toBe(values.length);
      }),
    );
  });
});

describe("time axes", () => {
  const phases = [{ from: at(0), to: at(10) }, { from: at(50), to: at(60) }, { from: at(90), to: at(100) }];
  it("is true to scale by default", () => {
    const axis = trueTimeAxis(at(0), at(100), 50, 150);
    expect(axis.place(ms(25))).toBe(75);
    expect(axis.place(ms(101))).toBeUndefined();
    expect(axis.invert(75)).toBe(ms(25));
    expect(() => trueTimeAxis(at(1), at(0), 0, 1)).toThrow(RangeError);
  });
  it("closes gaps and says where", () => {
    const axis = closedTimeAxis(at(0), at(100), phases, 0, 320, 10);
    expect(axis.place(ms(0))).toBe(0);
    expect(axis.place(ms(10))).toBe(100);
    expect(axis.place(ms(50))).toBe(110);
    expect(axis.place(ms(30))).toBeUndefined();
    expect(axis.breaks).toEqual([{ x: 105, before: 0, after: 1 }, { x: 215, before: 1, after: 2 }]);
  });
  it("gives each time of a phase its place and back", () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 2 }), fc.double({ min: 0.001, max: 9.999, noNaN: true }), (phase, hour) => {
        const axis = closedTimeAxis(at(0), at(100), phases, 40, 700);
        const time = ms([0, 50, 90][phase]! + hour);
        expect(axis.invert(axis.place(time)!)).toBeCloseTo(time, 0);
      }),
    );
  });
  it("is the true axis where no phase is in the window", () => expect(closedTimeAxis(at(20), at(40), phases, 0, 100).breaks).toEqual([]));
  it("takes round local times as ticks", () => {
    const texts = (hours: number, width: number) => timeTicks(at(0), at(hours), "Europe/Berlin", width).map(({ text }) => text);
    expect(texts(6, 500)).toEqual(["02:00", "03:00", "04:00", "05:00", "06:00", "07:00", "08:00"]);
    expect(texts(72, 500)).toEqual(["12:00", "5 May", "12:00", "6 May", "12:00", "7 May"]);
    expect(texts(21 * 24, 300)).toEqual(["11 May", "18 May", "25 May"]);
    expect(texts(400 * 24, 500)).toEqual(["Jul", "Sep", "Nov", "2027", "Mar", "May"]);
  });
});

describe("ticks", () => {
  it("are round, inside, and at most five", () => {
    expect(roundTicks(-72, 16)).toEqual([-60, -40, -20, 0]);
    expect(roundTicks(0, 1)).toEqual([0, 0.25, 0.5, 0.75, 1]);
    fc.assert(
      fc.property(fc.double({ min: -1e5, max: 1e5, noNaN: true }), fc.double({ min: 1e-3, max: 1e5, noNaN: true }), (low, span) => {
        const ticks = roundTicks(low, low + span);
        expect(ticks.length).toBeGreaterThanOrEqual(1);
        expect(ticks.length).toBeLessThanOrEqual(5);
        for (const tick of ticks) {
          expect(tick).toBeGreaterThanOrEqual(low - span * 1e-6);
          expect(tick).toBeLessThanOrEqual(low + span * (1 + 1e-6));
        }
      }),
    );
  });
  it("have as many decimals as part them", () => {
    expect(tickDecimals([24.98, 25, 25.02])).toBe(2);
    expect(tickDecimals([0, 0.25, 0.5])).toBe(2);
    expect(tickDecimals([1000, 1050])).toBe(0);
  });
  it("are powers of ten on log axes, with 2 to 9 between", () => {
    expect(decadeTicks(3e-8, 5e-5)).toEqual([1e-7, 1e-6, 1e-5].map((tick) => expect.closeTo(tick, 12)));
    expect(minorTicks(1, 10)).toEqual([2, 3, 4, 5, 6, 7, 8, 9]);
  });
  it("have a range for flat and for no data", () => {
    expect(rangeOf([])).toBeUndefined();
    const [low, high] = rangeOf([5, 5])!;
    expect(low).toBeLessThan(5);
    expect(high).toBeGreaterThan(5);
  });
});

describe("the deviation plot", () => {
  const point = (tau: number, noise?: string): DeviationPoint => ({ tau, deviation: 1e-6, low: 5e-7, high: 2e-6, n: 10, noise });
  const curve = (within: number[], across: number[]) => ({ id: "a", label: "air", pen: "ink" as const, within: within.map((tau) => point(tau)), across: across.map((tau) => point(tau)) });
  it("covers at least a decade and ignores what a log axis cannot show", () => {
    const [low, high] = logRange([2, 3, 0, -1, Number.NaN]);
    expect(high / low).toBeGreaterThan(9.999);
    expect(low).toBeLessThan(2);
    expect(high).toBeGreaterThan(3);
    expect(logRange([])).toEqual([1, 10]);
  });
  it("says what was not measured between inside and across phases", () => {
    const [from, to] = notMeasured([curve([360, 46_080], [176_760]), curve([360], [529_200])])!;
    expect(from).toBeGreaterThan(46_080);
    expect(to).toBeLessThan(176_760);
    expect(notMeasured([curve([360], [])])).toBeUndefined();
    expect(notMeasured([curve([360, 5e5], [1e5])])).toBeUndefined();
  });
  it("joins neighbouring averaging times under one noise", () => {
    expect(noiseStretches([point(360, "white"), point(720, "white"), point(1440, "flicker")])).toEqual([
      { from: 360 / Math.SQRT2, to: 720 * Math.SQRT2, noise: "white" },
      { from: 1440 / Math.SQRT2, to: 1440 * Math.SQRT2, noise: "flicker" },
    ]);
  });
  const label = (x: number, y: number, text = "water") => ({ x, y, text, gap: 9 });
  const room = { right: 400, bottom: 300 };
  it("moves labels apart only where they would touch", () => {
    expect(placeLabels([label(0, 10), undefined, label(5, 12), label(200, 11)], room)).toEqual([
      { x: 9, y: 10, anchor: "start" },
      undefined,
      { x: 14, y: 25, anchor: "start" },
      { x: 209, y: 11, anchor: "start" },
    ]);
  });
  it("puts a label that would leave the plot at the left of its point", () => {
    expect(placeLabels([label(390, 50, "Brine of thirty-five per mille")], room)).toEqual([{ x: 381, y: 50, anchor: "end" }]);
  });
  it("goes up where there is no room below, and past what is written already", () => {
    const taken = [{ x: 9, y: 295, anchor: "start" as const, text: "slope −½" }];
    expect(placeLabels([label(0, 296)], { ...room, taken })).toEqual([{ x: 9, y: 280, anchor: "start" }]);
  });
  it("leaves no two labels on each other, however many there are", () => {
    const places = placeLabels(Array.from({ length: 9 }, (_, i) => label(380 + (i % 3) * 5, 100 + i, "2-Propanol")), room);
    const heights = places.map((place) => place?.y ?? NaN).sort((a, b) => a - b);
    expect(heights.slice(1).every((y, i) => y - heights[i] >= 15)).toBe(true);
  });
});

describe("readings and files", () => {
  it("finds the nearest stop", () => {
    const stops = [{ x: 0 }, { x: 10 }, { x: 30 }];
    expect([-5, 4, 6, 19, 21, 99].map((x) => nearestStop(stops, x))).toEqual([0, 0, 1, 1, 2, 2]);
    expect(nearestStop([], 1)).toBeUndefined();
  });
  it("writes CSV with full precision, quotes what needs it, and lets no cell become a formula", () => {
    expect(tableAsCsv({ columns: [{ head: "a" }, { head: "b,c" }], rows: [[1 / 3, 'say "x"'], [null, "=1+1"], [Number.NaN, "-x"]] })).toBe('a,"b,c"\r\n0.3333333333333333,"say ""x"""\r\n,\'=1+1\r\n,\'-x\r\n');
  });
});
