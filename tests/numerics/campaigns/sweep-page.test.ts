import { describe, expect, test } from "vitest";
import { flagWords, wellWords } from "@/app/(app)/campaigns/[id]/readings/[sequence]/[index]/flag-words";
import { halfPowerPoints, resonanceArc, sweepViews, unitFor } from "@/app/(app)/campaigns/[id]/readings/[sequence]/[index]/sweep-views";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { FLAGS } from "@/lib/numerics/resonance/flags";
import { linearGrid, RESONANCE_PARAMETERS } from "@/lib/numerics/resonance/types";

const truth = { readout: "velocity" as const, f0Hz: 1100, q: 22, a: { re: 0.6, im: -0.8 }, b: { re: 0.06, im: 0.04 }, c: { re: -0.012, im: 0.019 } };
const frequencyHz = linearGrid(1000, 1200, 401);
const { re, im } = evaluateResonance(frequencyHz, truth);
const values = [truth.f0Hz, truth.q, truth.a.re, truth.a.im, truth.b.re, truth.b.im, truth.c.re, truth.c.im];
const parameters = RESONANCE_PARAMETERS.map((name, i) => ({ name, value: values[i], u: 1e-4, correlationWithF0: 0 }));
const curve = { frequencyHz: [...frequencyHz], measuredV: [...re.map((x, i) => Math.hypot(x, im[i]))], fittedV: [...re], re: [...re], im: [...im], fittedRe: [...re], fittedIm: [...im] };

describe("what the plots of a sweep show", () => {
  test("without offset and slope the resonance is a circle through nought with |a| as its diameter, its phase 0 at f0 and ±45° at half power", () => {
    const { phase, plane, residuals } = sweepViews(curve, parameters);
    plane?.fitted.re.forEach((x, i) => expect(Math.hypot(x - 0.3, (plane.fitted.im[i] ?? NaN) + 0.4)).toBeCloseTo(0.5, 9));
    expect(phase?.measured[200]).toBeCloseTo(0, 6);
    const low = truth.f0Hz * (Math.sqrt(1 + 1 / (4 * truth.q ** 2)) - 1 / (2 * truth.q));
    const below = frequencyHz.findIndex((f) => f > low);
    expect(phase?.measured[below]).toBeLessThan(45);
    expect(phase?.measured[below - 1]).toBeGreaterThan(45);
    expect(residuals?.inPhase.every((value) => value === 0)).toBe(true);
  });

  test("half-power points lie on that circle, a quarter turn from f0 each", () => {
    const [f0, above, below] = halfPowerPoints(parameters);
    expect(f0).toMatchObject({ re: 0.6, im: -0.8 });
    for (const { re: x, im: y } of [above, below]) expect(Math.hypot(x, y)).toBeCloseTo(1 / Math.SQRT2, 12);
    const after = evaluateResonance(Float64Array.of(truth.f0Hz * (Math.sqrt(1 + 1 / (4 * truth.q ** 2)) + 1 / (2 * truth.q))), { ...truth, b: undefined, c: undefined });
    expect(above).toMatchObject({ re: expect.closeTo(after.re[0], 9), im: expect.closeTo(after.im[0], 9) });
  });

  test("the arc lies on the circle and begins and ends where the fitted curve does", () => {
    const { phase, plane } = sweepViews(curve, parameters);
    const arc = resonanceArc(parameters, phase?.fitted ?? []);
    for (const { x, y } of arc) expect(Math.hypot(x - 0.3, y + 0.4)).toBeCloseTo(0.5, 9);
    for (const [end, at] of [[arc[0], 0], [arc[arc.length - 1], 400]] as const) expect(end).toEqual({ x: expect.closeTo(plane?.fitted.re[at] ?? NaN, 9), y: expect.closeTo(plane?.fitted.im[at] ?? NaN, 9) });
  });

  test("a magnitude has residuals only, a sweep without a fit nothing", () => {
    const magnitude = { frequencyHz: [1, 2], measuredV: [1, 3], fittedV: [1.5, 2.5] };
    expect(sweepViews(magnitude, [])).toEqual({ residuals: { inPhase: [-0.5, 0.5] } });
    expect(sweepViews({ ...magnitude, fittedV: [] }, [])).toEqual({});
    expect(halfPowerPoints([])).toEqual([]);
  });

  test("units make numbers of one to three digits", () => {
    expect(unitFor([0.0004])).toEqual(["µV", 1e6]);
    expect(unitFor([0.02, -0.4])).toEqual(["mV", 1e3]);
    expect(unitFor([2])).toEqual(["V", 1]);
  });
});

describe("flags in words", () => {
  const judged = { spanHalfWidths: 9.5, pointsInBand: 84, lag1: 0.391, lag1Limit: 0.2, dwellRingDowns: 19 };

  test("every flag says what it does to the phase value", () => {
    for (const { flag, rest } of flagWords(FLAGS, judged, 1427)) {
      const out = ["failed", "edge", "bent"].includes(flag);
      expect(rest, flag).toContain(out ? "left out of the phase value" : flag === "late" ? "never counts" : "The repeat counts, and is noted");
    }
  });

  test("with the figure it was judged by", () => {
    expect(flagWords(["distorted"], judged, 1427)[0].rest).toBe("lag-1 correlation 0.39, more than 0.2. A bubble or a second mode can do this. The repeat counts, and is noted.");
    expect(flagWords(["noisy"], judged, 3.21)[0].rest).toContain("3.2, below 5");
  });

  test("what is well leaves out what is not", () => {
    expect(wellWords([], judged)).toBe("Converged. f₀ lies in the middle of the sweep. Span is 9.5 half-widths, with 84 points inside half power. Signal is strong. Residuals are free of each other. Dwell is 19 ring-down times. Peak not bent at 4σ. Clock right, not late.");
    expect(wellWords(["noisy", "bent"], judged)).not.toMatch(/Signal|bent/);
    expect(wellWords(["failed"], judged)).toBe("");
  });
});
