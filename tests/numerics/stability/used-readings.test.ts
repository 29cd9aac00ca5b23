import fc from "fast-check";
import { describe, expect, test } from "vitest";
import { FLAGS, flagBits } from "@/lib/numerics/resonance/flags";
import { stretches } from "@/lib/numerics/stability/stretches";
import { usedReadings } from "@/lib/numerics/stability/used-readings";

const values = Float64Array.of(1, 2, NaN, 4, 5, 6, NaN);
const flags = Uint16Array.of(0, flagBits(["noisy"]), 0, flagBits(["edge", "noisy"]), flagBits(["bent", "late"]), 0, flagBits(["failed"]));

describe("readings used and left out", () => {
  test("by the flags that keep a reading out of its phase value", () => {
    expect(usedReadings({ values, flags })).toEqual({
      leftOut: Uint8Array.of(0, 0, 1, 1, 1, 0, 1),
      used: 3,
      reasons: { "no value": 1, edge: 1, bent: 1, failed: 1 },
      flaggedButUsed: { noisy: 1 },
    });
  });
  test("other flags can leave out or be let in", () => {
    const found = usedReadings({ values, flags, leavesOut: flagBits(["noisy", "failed"]) });
    expect(found.reasons).toEqual({ noisy: 2, "no value": 1, failed: 1 });
    expect(found.used).toBe(3);
    expect(found.flaggedButUsed).toEqual({ bent: 1, late: 1 });
  });
  test("without a value none is used, whatever the flags", () => {
    expect(usedReadings({ values, flags, leavesOut: 0 }).reasons).toEqual({ "no value": 2 });
  });
  test("discarded before excluded before flagged", () => {
    const found = usedReadings({ values, flags, discarded: Uint8Array.of(1, 1, 0, 0, 0, 0, 0), excluded: Uint8Array.of(1, 0, 0, 1, 0, 1, 0) });
    expect(found.reasons).toEqual({ discarded: 2, excluded: 2, "no value": 1, bent: 1, failed: 1 });
  });
  test("unequal lengths are an error, none is nothing", () => {
    expect(() => usedReadings({ values, flags: flags.subarray(1) })).toThrow(RangeError);
    expect(usedReadings({ values: new Float64Array(0), flags: new Uint16Array(0) })).toMatchObject({ used: 0, reasons: {} });
  });
});

test("every reading is used or has one reason, and the series can be cut with the marks", () => {
  const reading = fc.record({ value: fc.oneof(fc.double({ noNaN: true }), fc.constant(NaN)), bits: fc.nat({ max: (1 << FLAGS.length) - 1 }), excluded: fc.boolean() });
  fc.assert(
    fc.property(fc.array(reading, { minLength: 2 }), fc.nat({ max: (1 << FLAGS.length) - 1 }), (readings, leavesOut) => {
      const y = Float64Array.from(readings, ({ value }) => (Number.isFinite(value) ? value : NaN));
      const marks = { flags: Uint16Array.from(readings, ({ bits }) => bits), excluded: Uint8Array.from(readings, ({ excluded }) => (excluded ? 1 : 0)) };
      const { leftOut, used, reasons } = usedReadings({ values: y, ...marks, leavesOut });
      expect(used + Object.values(reasons).reduce((sum, count) => sum + count, 0)).toBe(readings.length);
      const cut = stretches({ atS: y.map((_, i) => i), y, leftOut });
      expect(cut.stretches.reduce((sum, { length }) => sum + length, 0)).toBe(used);
    }),
  );
});
