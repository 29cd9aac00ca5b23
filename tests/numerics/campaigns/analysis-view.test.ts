import { describe, expect, test } from "vitest";
import { airWords, coolingWords } from "@/app/(app)/campaigns/[id]/stability/air-words";
import { readAnalysisView, toggled } from "@/app/(app)/campaigns/[id]/stability/analysis-view";
import { lineAt } from "@/app/(app)/campaigns/[id]/stability/drift-data";
import { partText } from "@/app/(app)/campaigns/[id]/stability/noise-table";
import { againstTemperature } from "@/app/(app)/campaigns/[id]/stability/temperature-data";
import { deadTimeWords, readingsWords } from "@/app/(app)/campaigns/[id]/stability/what-was-used";
import type { AirReturnAnswer, DriftAnswer } from "@/lib/analysis/schema";

const DAY_MS = 86_400_000;

describe("the view in the address", () => {
  test("an empty address is the usual view", () => {
    expect(readAnalysisView({})).toEqual({
      tab: "stability", quantity: "f0", normalise: "fractional", points: "both", statistic: "oadev", taus: "octave", confidence: "0.683", compensate: "none", deadTime: "stated", openGaps: false,
    });
  });

  test("every choice is read back", () => {
    const address = {
      tab: "drift", quantity: "q", normalise: "absolute", medium: "air,W", with: "C-102:P", points: "phases", statistic: "hdev", taus: "decade", confidence: "0.95", setPointC: "25",
      cycles: "1-20", fitRunId: "7", compensate: "temperature", leaveOut: "failed,edge", deadTime: "corrected", from: "2026-05-01T00:00:00Z", to: "2026-05-02T00:00:00Z", gaps: "open",
    };
    expect(readAnalysisView(address)).toEqual({
      tab: "drift", quantity: "q", normalise: "absolute", media: ["air", "W"], beside: { campaignId: "102", medium: "P" }, points: "phases", statistic: "hdev", taus: "decade", confidence: "0.95", setPointC: 25,
      cycles: "1-20", fitRunId: "7", compensate: "temperature", leaveOut: "failed,edge", deadTime: "corrected", window: { from: address.from, to: address.to }, openGaps: true,
    });
  });

  test("what is no choice is left out, so that any link shows something", () => {
    const odd = { tab: "x", quantity: "x", medium: ",", with: "nobody", statistic: "sd", taus: "few", confidence: "2", setPointC: "warm", cycles: "9-3", fitRunId: "0", leaveOut: "odd", from: "2026-05-02T00:00:00Z", to: "2026-05-01T00:00:00Z" };
    expect(readAnalysisView(odd)).toEqual(readAnalysisView({}));
  });

  test("media are put in and taken out in their order; all of them need no word, the last stays", () => {
    const all = ["air", "W", "P"];
    expect(toggled(all, "W", all)).toBe("air,P");
    expect(toggled(["air", "P"], "W", all)).toBeNull();
    expect(toggled(["P"], "air", all)).toBe("air,P");
    expect(toggled(["P"], "P", all)).toBe("P");
  });
});

test("noise parts are written with their uncertainty in the last digits, absent ones by what they may be at most", () => {
  expect(partText(1.2345e-13, 8e-15)).toBe("1.23(8)\u2009×\u200910⁻¹³");
  expect(partText(5.6e-4, 2e-4)).toBe("6(2)\u2009×\u200910⁻⁴");
  expect(partText(0, 3e-14)).toBe("below 6.0\u2009×\u200910⁻¹⁴");
  expect(partText(2e-14, 2.13e-12)).toBe("below 4.3\u2009×\u200910⁻¹²");
  expect(partText(0, NaN)).toBe("none");
});

test("what was used is said by reason, pauses by what they do", () => {
  expect(readingsWords({ n: 100, used: 85, reasons: { edge: 12, excluded: 3 }, flaggedButUsed: { noisy: 40 } })).toBe("Left out: 12 edge and 3 by a person. Used although flagged: 40 noisy.");
  expect(readingsWords({ n: 100, used: 100, reasons: {}, flaggedButUsed: {} })).toBe("Nothing was left out.");
  const dead = { repeatS: 8, r: 1.25, deadShare: 0.2, largestEffect: 0.031 };
  expect(deadTimeWords({ ...dead, treatment: "stated" })).toContain("20\u00a0% of the time nothing is measured; it changes points by up to 3.1\u00a0%, which is stated");
  expect(deadTimeWords({ ...dead, treatment: "corrected" })).toContain("B₂ and B₃");
  expect(deadTimeWords({ ...dead, largestEffect: null, treatment: "not available" })).toContain("no bias functions");
});

const drift = (given: Partial<DriftAnswer>): DriftAnswer => ({
  slopePerDay: 0.002, u: 1e-4, ppmPerDay: 1, lower: 0.0018, upper: 0.0022, unit: "Hz", intercept: 1000, from: "2026-05-01T00:00:00.000Z", to: "2026-05-05T00:00:00.000Z", n: 5, leastSquares: null, theilSen: null, steps: [], values: [], used: "5 phase values", ...given,
});

test("the drift line passes through its intercept at its first value and rises by its slope a day", () => {
  const start = Date.parse("2026-05-01T00:00:00Z");
  expect(lineAt(drift({}), start)).toBe(1000);
  expect(lineAt(drift({}), start + 2 * DAY_MS)).toBeCloseTo(1000.004, 9);
  expect(lineAt(drift({ slopePerDay: null }), start)).toBeUndefined();
});

test("against temperature the drift is taken off and the points lie on the curve of the coefficients", () => {
  const values = [-0.2, 0.1, 0, 0.3, -0.1].map((theta, day) => ({
    at: new Date(Date.parse("2026-05-01T00:00:00Z") + day * DAY_MS).toISOString(), value: 1000 + 0.002 * day - 0.15 * theta + 0.02 * theta ** 2, u: 1e-4, cycle: day + 1, phaseId: String(day), temperatureC: 25 + theta,
  }));
  const terms = [{ name: "linear" as const, value: -0.15, u: 0.001 }, { name: "quadratic" as const, value: 0.02, u: 0.001 }];
  const compensation = { applied: true, model: "quadratic" as const, referenceC: 25, terms, driftPerDay: 0.002, driftU: 1e-5, attenuation: null, n: 5, used: "" };
  const found = againstTemperature(drift({ values }), drift({ values, compensation }), { symbol: "f", scale: 1000, unit: "mHz", reference: 1000 });
  const [{ points = [] }, { line = [] }] = found?.series ?? [{}, {}];
  points.forEach(({ x, y }) => expect(y).toBeCloseTo(-0.15 * x + 20 * (x / 1000) ** 2, 6));
  expect(line[0]).toMatchObject({ x: expect.closeTo(-200, 6), y: expect.closeTo(30.8, 6) });
  expect(againstTemperature(drift({ values }), drift({ values }), { symbol: "f", scale: 1000, reference: 1000 })).toBeUndefined();
});

describe("the air reference in words", () => {
  const none: AirReturnAnswer = { verdict: "too few", n: 0, growth: null, steps: [], cleanedAgain: { times: 0, takesOff: "untried", share: null, shareU: null }, cooling: null, used: "" };
  const growth = { f0PpmPerDay: -0.5, f0U: 0.05, qPercentPerDay: -0.1, qU: 0.01, totalPpm: -12.3, lossFactor: 0.4, lossFactorU: 0.1, q: "falls" as const };

  test("each verdict is a sentence of its own", () => {
    expect(airWords({ ...none, n: 4 })).toBe("4 air references have followed an ordinary clean; ten are needed to tell residue from ageing.");
    expect(airWords({ ...none, verdict: "none", n: 30 })).toContain("can be told from its noise");
    expect(airWords({ ...none, verdict: "residue", growth })).toBe("Residue builds up: the air reference moves by −12\u00a0ppm over the record, and loss comes with it.");
    expect(airWords({ ...none, verdict: "ageing", growth })).toContain("without loss");
    expect(airWords({ ...none, verdict: "undecided", growth })).toContain("cannot be told");
    expect(airWords({ ...none, verdict: "step", steps: [{ at: "", f0Ppm: -8, f0U: 0.4, qPercent: 0, qU: 0.1 }] })).toBe("A step keeps the air reference away: −8.0(4)\u00a0ppm.");
  });

  test("cooling says how many repeats to leave out", () => {
    const transient = { amplitude: 0.02, amplitudeU: 0.001, tauS: 300, tauU: 20, isSignificant: true };
    const cooling = { preferred: "exponential" as const, transient, discard: { repeats: 9, waitS: 540, biasLeft: 1e-6, tolerance: 2e-6 }, phases: 12, n: 600 };
    expect(coolingWords(cooling)).toContain("Leave out the first 9 repeats, or wait 9\u00a0min");
    expect(coolingWords({ ...cooling, discard: { ...cooling.discard, repeats: null } })).toContain("wait longer");
    expect(coolingWords({ ...cooling, transient: { ...transient, isSignificant: false } })).toContain("no repeat needs to be left out");
    expect(coolingWords(null)).toContain("ten repeats");
  });
});
