import { describe, expect, test } from "vitest";
import type { Sweep } from "@/lib/protocol/schema";
import { findSweep, followsTrack, resolveSweep } from "@/lib/protocol/sweep-params";

const abilities = { minHz: 100, maxHz: 20_000, maxPoints: 2001, maxDriveV: 0.5 };
const track = { f0Hz: 8000, q: 400 };
const sweep: Sweep = { centre: "track", span: { halfWidths: 8 }, points: 201, dwell: { ringDowns: 5 }, driveV: 0.1 };

describe("a sweep that follows the last good fit", () => {
  test("spans the total of n half-widths f0/2Q, centred on f0, and dwells n ring-downs Q/πf0", () => {
    // f0/2Q = 10 Hz, so 8 half-widths are 80 Hz; Q/πf0 = 15.915 ms.
    expect(resolveSweep(sweep, track, abilities)).toEqual({
      startHz: 7960,
      stopHz: 8040,
      points: 201,
      dwellS: expect.closeTo(5 * 0.0159154943, 9),
      driveV: 0.1,
    });
  });

  test("cannot be resolved without one", () => {
    expect(() => resolveSweep(sweep, undefined, abilities)).toThrow(RangeError);
    expect(() => resolveSweep(sweep, { f0Hz: NaN, q: 1 }, abilities)).toThrow(RangeError);
  });
});

describe("the ends of a sweep", () => {
  test("stay within the rig's range, the points unchanged", () => {
    expect(resolveSweep({ ...sweep, span: { hz: 4000 } }, track, { ...abilities, minHz: 7000, maxHz: 9000 })).toMatchObject({
      startHz: 7000,
      stopHz: 9000,
      points: 201,
    });
  });

  test("begin at f0/4 at the lowest", () => {
    expect(resolveSweep({ ...sweep, span: { hz: 15_000 } }, track, abilities)).toMatchObject({ startHz: 2000, stopHz: 15_500 });
  });

  test("leave nothing where the resonance lies outside the range", () => {
    expect(resolveSweep(sweep, track, { ...abilities, maxHz: 7000 })).toBeUndefined();
  });
});

test("points and drive are at most what the rig can", () => {
  expect(resolveSweep({ ...sweep, points: 4001, driveV: 2 }, track, abilities)).toMatchObject({ points: 2001, driveV: 0.5 });
});

test("a sweep in Hz and seconds needs no resonance", () => {
  const fixed: Sweep = { centre: 5000, span: { hz: 100 }, points: 101, dwell: { s: 0.2 }, driveV: 0.1 };
  expect(followsTrack(fixed)).toBe(false);
  expect(resolveSweep(fixed, undefined, abilities)).toEqual({ startHz: 4950, stopHz: 5050, points: 101, dwellS: 0.2, driveV: 0.1 });
  expect(followsTrack({ ...fixed, span: { halfWidths: 8 } })).toBe(true);
  expect(followsTrack({ ...fixed, dwell: { ringDowns: 8 } })).toBe(true);
});

describe("the search for a resonance", () => {
  const around = { search: undefined, medium: "air", nominal: track, elsewhere: undefined, abilities };

  test("is the protocol's own where it names one", () => {
    expect(findSweep(sweep, { ...around, search: { fromHz: 3000, toHz: 9000, points: 801 } })).toMatchObject({ startHz: 3000, stopHz: 9000, points: 801 });
  });

  test("in air looks 10 % to both sides of the nominal value, two points a half-width", () => {
    expect(findSweep(sweep, around)).toMatchObject({ startHz: 7200, stopHz: 8800, points: 401 });
    expect(findSweep(sweep, { ...around, nominal: { f0Hz: 8000, q: 4000 } })).toMatchObject({ points: 2001 });
  });

  test("in a liquid looks far below the value in air", () => {
    expect(findSweep(sweep, { ...around, medium: "water" })).toMatchObject({ startHz: 3200, stopHz: 8400 });
  });

  test("reaches ten half-widths where the resonance is wider than that", () => {
    expect(findSweep(sweep, { ...around, medium: "oil", elsewhere: { f0Hz: 4000, q: 10 } })).toMatchObject({ startHz: 2000, stopHz: 6000 });
  });

  test("keeps to the same medium at another temperature where that is known", () => {
    expect(findSweep(sweep, { ...around, medium: "water", elsewhere: { f0Hz: 6000, q: 100 } })).toMatchObject({
      startHz: expect.closeTo(5400, 6),
      stopHz: expect.closeTo(6600, 6),
    });
  });
});
