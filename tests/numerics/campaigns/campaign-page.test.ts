import { describe, expect, test } from "vitest";
import { nowWords, vitalsOf } from "@/app/(app)/campaigns/[id]/vitals";
import { possible } from "@/app/(app)/campaigns/[id]/possible";
import { driftLine, panelsOf, phasesOf, referenceOf } from "@/app/(app)/campaigns/[id]/repeats-data";
import { unmeasured } from "@/app/(app)/campaigns/[id]/verb-dialogs";
import { readView } from "@/app/(app)/campaigns/[id]/view";
import { readFilter, sortOf } from "@/app/(app)/campaigns/list-filter";
import { overviewSentence } from "@/app/(app)/campaigns/overview-sentence";
import type { DriftAnswer, SeriesAnswer } from "@/lib/analysis/schema";
import type { CampaignAnswer } from "@/lib/campaigns/answers";
import { campaignCode, campaignIdOf } from "@/lib/campaigns/code";

const DAY_MS = 86_400_000;
const START = Date.parse("2026-05-01T00:00:00Z");
const day = (days: number) => new Date(START + days * DAY_MS).toISOString();

const campaign = (given: Partial<CampaignAnswer> = {}): CampaignAnswer => ({
  id: "118", name: "Three liquids", number: 1, state: "running", word: "Measuring", setAside: false, origin: "protocol", priority: 0, rigId: "1", rig: "North bench",
  timeZone: "UTC", sensorId: "1", sensor: "WR-2207", protocolId: "1", protocolVersionId: "1", protocol: "Long phases", version: 4, startAt: null, startedAt: day(0),
  endedAt: null, startedClock: day(0), endedClock: null, cursor: null, cycle: 8, progress: { repeats: 2288, repeatsPlanned: 3000, cycles: 10 },
  expectedEnd: { at: day(18), earliest: day(17.9), latest: day(18.1) }, shiftPpm: -40, air: { shiftMHz: -49.5, u: 0.4, limitMHz: 60 }, last: null, createdBy: null, endText: null,
  parking: "none", holds: [], slots: [], media: [{ medium: "propanol", repeats: 188, letter: "P", tint: 2, name: "2-Propanol" }], amendments: [], setPointsC: [],
  step: { sequence: 4, kind: "measure", label: "Measure propanol", state: "out", medium: "propanol", stored: 188, repeats: 300, dueAt: null }, lastContactAt: null, clock: "real", now: day(12),
  ...given,
});

const hold = (reason: CampaignAnswer["holds"][number]["reason"], releasedAt?: string): CampaignAnswer["holds"][number] => ({ id: reason, reason, openedAt: day(1), since: day(1), text: reason, releasedAt });

describe("what is possible now", () => {
  test("a running campaign can be paused, stopped, set aside and taken over", () => {
    expect(possible(campaign())).toMatchObject({ pause: null, stop: null, setAside: null, takeOver: null, giveBack: false, goOn: "nothing holds it" });
  });

  test.each(["task", "takeOver", "silence"] as const)("a campaign that waits for %s alone cannot go on, and says why", (reason) => {
    expect(possible(campaign({ state: "held", holds: [hold(reason)] })).goOn).toContain("it goes on when");
  });

  test("with another hold beside, a person can let it go on; a released hold counts no more", () => {
    expect(possible(campaign({ state: "held", holds: [hold("task"), hold("person")] })).goOn).toBeNull();
    expect(possible(campaign({ state: "held", holds: [hold("task", day(2)), hold("limit")] })).goOn).toBeNull();
  });

  test("after parking or being set aside it goes on from the phase or the cycle, not from here", () => {
    for (const changes of [{ parking: "parked" as const, holds: [hold("limit")] }, { setAside: true, holds: [hold("setAside")] }]) {
      const { from } = possible(campaign({ state: "held", ...changes }));
      expect(from).toMatchObject({ here: expect.any(String), phase: null, cycle: null });
    }
  });

  test("what has not begun or has ended says so", () => {
    expect(possible(campaign({ state: "queued" }))).toMatchObject({ pause: "it has not begun", setAside: "it has not begun", takeOver: "it has not begun", stop: null });
    expect(possible(campaign({ state: "finished" }))).toMatchObject({ stop: "it has ended", pause: "it has ended" });
  });
});

describe("words of the page", () => {
  test("now, cycle, end and air reference stand with unit, uncertainty and range", () => {
    expect(nowWords(campaign())).toBe("2-Propanol, repeat 188 of 300");
    expect(vitalsOf(campaign()).map(({ value, note }) => [value, note])).toEqual([
      ["2-Propanol, repeat 188 of 300", undefined],
      ["8 of 10", "2\u2009288 of 3\u2009000 repeats"],
      ["Tue 19 May 00:00", "±\u20092\u00a0h"],
      ["−49.5(4)\u00a0mHz", "limit ±\u200960"],
    ]);
  });

  test("the cost of stopping is what would not be measured", () => {
    expect(unmeasured(campaign())).toBe("712 repeats would not be measured.");
    expect(unmeasured(campaign({ progress: { repeats: 3000, repeatsPlanned: 3000, cycles: 10 } }))).toBe("");
  });

  test("the list says first what matters", () => {
    expect(overviewSentence({ measuring: 3, halted: 1, waiting: 0, paused: 0, queued: 5 })).toBe("Three campaigns measure, one is halted and five wait in line.");
    expect(overviewSentence({ measuring: 0, halted: 0, waiting: 0, paused: 0, queued: 0 })).toBe("No campaign is under way.");
  });

  test("a campaign is named C-118 and found by that or the bare number", () => {
    expect(campaignCode("118")).toBe("C-118");
    expect(["C-118", "c-118", "118"].map(campaignIdOf)).toEqual(["118", "118", "118"]);
    expect(["C-", "C-0", "new", "C-12x", "C-C-1"].map(campaignIdOf)).toEqual(Array(5).fill(undefined));
  });
});

describe("the address", () => {
  test("a view is read back, and what is no view is left out", () => {
    expect(readView({ medium: "water", from: day(1), to: day(2), gaps: "open", statistic: "mdev", points: "within", quantity: "q" })).toEqual({ medium: "water", window: { from: day(1), to: day(2) }, openGaps: true, quantity: "q", statistic: "mdev", points: "within" });
    expect(readView({ from: day(2), to: day(1), statistic: "odd", points: "odd" })).toEqual({ medium: "air", openGaps: false, quantity: "f0", statistic: "oadev", points: "both" });
  });

  test("a filter is read back, and what is no filter is left out", () => {
    expect(readFilter({ state: "done", rig: "3", sensor: "x", search: "  wire " })).toEqual({ state: "done", rigId: "3", search: "wire" });
    expect(sortOf({ sort: "line" }, "-name")).toBe("-name");
    expect(sortOf({ sort: "line" }, "drop table")).toBe("line");
  });
});

const bucket = (phaseId: string, from: number, to: number, mean: number, min = mean, max = mean): SeriesAnswer["buckets"][number] => ({ phaseId, cycle: 1, from: day(from), to: day(to), mean, min, max, n: 1 });
const series = (...buckets: SeriesAnswer["buckets"]): SeriesAnswer => ({ unit: "Hz", n: buckets.length, leftOut: 0, buckets });

const drift: DriftAnswer = {
  slopePerDay: -0.002, u: 0.0002, lower: -0.0025, upper: -0.0015, ppmPerDay: -1, unit: "Hz", intercept: 2400, from: day(0), to: day(4), n: 3, leastSquares: null, theilSen: null, steps: [],
  values: [0, 2, 4].map((at) => ({ at: day(at), value: 2400 - 0.002 * at, u: 1e-4, cycle: 1, phaseId: String(at) })), used: "3 phase values",
};

describe("repeats for the plot", () => {
  test("the reference is the baseline, else the first phase value, to 0.1 mHz", () => {
    expect(referenceOf({ baselineHz: 2400.12344, drift, series: undefined })).toBe(2400.1234);
    expect(referenceOf({ baselineHz: null, drift, series: undefined })).toBe(2400);
    expect(referenceOf({ baselineHz: null, drift: undefined, series: series(bucket("1", 0, 0, 9)) })).toBe(9);
    expect(referenceOf({ baselineHz: null, drift: undefined, series: undefined })).toBeUndefined();
  });

  test("a phase reaches from its first to its last repeat; one repeat has a width too", () => {
    const phases = phasesOf(series(bucket("a", 0, 0.1, 1), bucket("a", 0.1, 0.5, 1), bucket("b", 2, 2, 1)), (id) => id.toUpperCase());
    expect(phases).toEqual([{ from: day(0), to: day(0.5), letter: "A" }, { from: day(2), to: new Date(START + 2 * DAY_MS + 1000).toISOString(), letter: "B" }]);
  });

  test("the drift line has its slope, and its band closes at the mean time of the phase values", () => {
    const line = driftLine(drift, [{ from: day(0), to: day(2) }, { from: day(3), to: day(4) }], (hz) => (hz - 2400) * 1000);
    expect(line?.map(({ value }) => Number(value.toFixed(6)))).toEqual([0, -4, -6, -8]);
    expect(line?.map(({ low = 0, high = 0 }) => Number((high - low).toFixed(6)))).toEqual([2, 0, 1, 2]);
    expect(driftLine({ ...drift, slopePerDay: null }, [], (hz) => hz)).toBeUndefined();
  });

  test("extremes of the buckets stay extremes as shifts, and a limit shows once the values have gone a third of the way", () => {
    const f0 = series(bucket("a", 0, 1, 2400, 2399.99, 2400.01), bucket("b", 2, 3, 2399.98, 2399.97, 2399.99));
    const panels = (limitMHz: number) => panelsOf({ name: "Air", f0, q: series(), temperature: undefined, drift: undefined, referenceHz: 2400, limitMHz, phases: [] });
    const [panel, ...others] = panels(60);
    expect(panel?.series[0]?.buckets?.map(({ min, max }) => [Math.round(min), Math.round(max)])).toEqual([[-10, 10], [-30, -10]]);
    expect(panel?.limits).toEqual([{ value: -60, label: "limit −60 mHz" }]);
    expect(panels(1000)[0]?.limits).toEqual([]);
    expect(others).toEqual([]);
  });
});
