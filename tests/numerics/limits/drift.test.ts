import { describe, expect, test } from "vitest";
import { judgeDrift } from "@/lib/limits/drift";
import { drift } from "@/lib/numerics/drift/drift";
import { factsOf, limitOf } from "./limit-facts";

const perDay = (ppmPerDay: number, given: Record<string, unknown> = {}) => limitOf({ kind: "drift", quantity: "f0", ppmPerDay, ...given });
const NOISE = [0.3, -0.5, 0.1, 0.4, -0.2, -0.4, 0.5, 0.2, -0.3, -0.1];
const line = (slope: number, n = 10) => NOISE.slice(0, n).map((noise, i) => slope * i + noise);

const judge = (limit: Parameters<typeof judgeDrift>[0], series: readonly number[]) => judgeDrift(limit, factsOf({ ppm: series.at(-1), series }));

describe("slope", () => {
  test("recovers a known slope and says it with its expanded uncertainty", () => {
    const verdict = judge(perDay(2), line(-5));
    expect(verdict).toMatchObject({ state: "breach", limit: 2, unit: "ppm/d" });
    expect(verdict?.value).toBeCloseTo(-5, 0);
    expect(verdict?.text).toMatch(/^f0 in air drifts by −\d[\d.]* ± [\d.]+ ppm a day \(k = 2\), limit 2 ppm a day$/);
  });

  test("only |slope| − 2u counts: just under the slope a limit is not exceeded beyond doubt, under slope − 2u it is", () => {
    const series = line(5);
    const { slopePerDay, u } = fitOf(series);
    const certain = Math.abs(slopePerDay) - 2 * u;
    expect(u).toBeGreaterThan(0.01);
    expect(judge(perDay(slopePerDay * 0.999), series)?.state).not.toBe("breach");
    expect(judge(perDay(certain * 1.001), series)?.state).not.toBe("breach");
    expect(judge(perDay(certain * 0.999), series)?.state).toBe("breach");
  });

  test("between clearAt and the limit an open alarm stays what it is", () => {
    const series = line(5);
    const { slopePerDay, u } = fitOf(series);
    const certain = Math.abs(slopePerDay) - 2 * u;
    expect(judge(perDay(certain / 0.9), series)?.state).toBe("between");
    expect(judge(perDay(certain / 0.79), series)?.state).toBe("inside");
    expect(judge(perDay(certain / 0.79, { clearAt: 0.5 }), series)?.state).toBe("between");
  });

  test("scatter without drift is inside", () => {
    expect(judge(perDay(0.5), NOISE)?.state).toBe("inside");
  });

  test("needs five phases", () => {
    expect(judge(perDay(0.1), line(100, 4))).toBeUndefined();
    expect(judge(perDay(0.1), line(100, 5))?.state).toBe("breach");
  });

  test("Q drifts by the same rule", () => {
    expect(judge(limitOf({ kind: "drift", quantity: "q", ppmPerDay: 2 }), line(-5))).toMatchObject({ state: "breach", text: expect.stringMatching(/^Q in air/) });
  });
});

describe("what it looks at", () => {
  const series = line(100);

  test("without a medium, air references only", () => {
    expect(judgeDrift(perDay(1), factsOf({ series, phase: { role: "check" } }))).toBeUndefined();
    expect(judgeDrift(perDay(1), factsOf({ series, phase: { medium: "sample", role: "sample" } }))).toBeUndefined();
  });

  test("with one, its phases but for checks", () => {
    const inSample = perDay(1, { medium: "sample" });
    expect(judgeDrift(inSample, factsOf({ series, phase: { medium: "sample", role: "sample" } }))?.state).toBe("breach");
    expect(judgeDrift(inSample, factsOf({ series, phase: { medium: "sample", role: "check" } }))).toBeUndefined();
  });
});

describe("a crossing to come", () => {
  const crossing = (crossesPpm: number, withinDays: number) => limitOf({ kind: "drift", quantity: "f0", crossesPpm, withinDays });

  test("45 ppm in nine days at 5 ppm a day cross 60 ppm within seven, not within one", () => {
    expect(judge(crossing(60, 7), line(5))).toMatchObject({ state: "breach", unit: "ppm", limit: 60 });
    expect(judge(crossing(60, 1), line(5))?.state).not.toBe("breach");
  });

  test("it counts from the first phase of the series, downwards too", () => {
    const verdict = judge(crossing(60, 7), line(-5));
    const { slopePerDay, u } = fitOf(line(-5));
    expect(verdict?.value).toBeCloseTo(Math.abs(slopePerDay * 9) + (Math.abs(slopePerDay) - 2 * u) * 7, 6);
  });

  test("a slope that is not beyond doubt crosses nothing", () => {
    expect(judge(crossing(0.001, 1000), NOISE)?.state).toBe("inside");
  });
});

/** The line that the limit draws: in ppm of the mean. */
function fitOf(series: readonly number[]) {
  const { atDays, f0Hz } = factsOf({ series }).series;
  const mean = f0Hz.reduce((sum, value) => sum + value, 0) / f0Hz.length;
  const found = drift({ atDays, values: f0Hz.map((value) => (value / mean - 1) * 1e6) });
  if (!found) throw new Error("no line");
  return found;
}
