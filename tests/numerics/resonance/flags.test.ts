import { describe, expect, it } from "vitest";
import { FLAGS, flagBits, flagNames, LEFT_OUT, type Flag } from "@/lib/numerics/resonance/flags";

describe("flag bits", () => {
  it("keep the order that stored readings rely on", () => {
    expect(FLAGS.map((flag) => [flag, flagBits([flag])])).toEqual([
      ["failed", 1], ["edge", 2], ["bent", 4], ["narrow", 8], ["sparse", 16],
      ["noisy", 32], ["distorted", 64], ["rushed", 128], ["clock", 256], ["late", 512],
    ]);
  });

  it("give back every set of flags", () => {
    for (let bits = 0; bits < 1024; bits++) expect(flagBits(flagNames(bits))).toBe(bits);
  });

  it("leave out failed, edge, bent and late, and nothing else", () => {
    const out: Flag[] = ["failed", "edge", "bent", "late"];
    for (const flag of FLAGS) expect((flagBits([flag]) & LEFT_OUT) !== 0).toBe(out.includes(flag));
  });

  it("refuse numbers that are no set of flags", () => {
    for (const bits of [-1, 1024, 1.5, NaN]) expect(() => flagNames(bits)).toThrow(RangeError);
  });
});
