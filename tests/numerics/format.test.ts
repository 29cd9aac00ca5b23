import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { asSentence, capitalised, formatCount, formatNumber, formatPower, formatShare, formatUncertain, formatVolume, inWords, listOf, plural, superscript, uncertaintyDecimals } from "@/lib/format";

const plain = (text: string) => text.replace(/\u2009/g, "").replace("\u2212", "-");

describe("numbers", () => {
  it("groups three digits on both sides of the point with thin spaces", () => {
    expect(formatNumber(1234567.12345, { decimals: 5 })).toBe("1\u2009234\u2009567.123\u200945");
    expect(formatNumber(999.9999, { decimals: 4 })).toBe("999.999\u20099");
  });
  it("writes the minus sign U+2212 and a plus only when asked", () => {
    expect(formatNumber(-49.5, { decimals: 1 })).toBe("\u221249.5");
    expect(formatNumber(49.5, { decimals: 1, signed: true })).toBe("+49.5");
  });
  it("never writes minus nought", () => {
    expect(formatNumber(-0.04, { decimals: 1 })).toBe("0.0");
    expect(formatNumber(-0, { decimals: 0, signed: true })).toBe("0");
  });
  it("gives a dash for what is not a number", () => {
    expect(formatNumber(Number.NaN)).toBe("\u2013");
    expect(formatNumber(Number.POSITIVE_INFINITY, { decimals: 1 })).toBe("\u2013");
  });
  it("writes small and large values without an exponent", () => {
    expect(formatNumber(1e-7)).toBe("0.000\u2009000\u20091");
    expect(formatCount(12_600_000)).toBe("12\u2009600\u2009000");
  });
  it("keeps the value: what is written reads back as the rounded number", () => {
    fc.assert(
      fc.property(fc.double({ min: -1e9, max: 1e9, noNaN: true }), fc.integer({ min: 0, max: 6 }), (value, decimals) => {
        expect(Number(plain(formatNumber(value, { decimals })))).toBeCloseTo(Number(value.toFixed(decimals)), 9);
      }),
    );
  });
});

describe("uncertainty in the last digits", () => {
  // JCGM 100:2008, 7.2.2: m = 100,021 47(35) g for u = 0,35 mg; here with one digit unless the first is 1 or 2.
  it("writes the example of the GUM, 7.2.2, with two digits", () => {
    expect(plain(formatUncertain(100.02147, 0.00035, { digits: 2 }))).toBe("100.02147(35)");
  });
  it("keeps two digits when the first is 1 or 2, one otherwise", () => {
    expect(plain(formatUncertain(1234.5678, 0.0012))).toBe("1234.5678(12)");
    expect(plain(formatUncertain(-49.52, 0.41))).toBe("-49.5(4)");
    expect(plain(formatUncertain(21.8413, 0.0029))).toBe("21.8413(29)");
  });
  it("carries a rounding over to the next place", () => {
    expect(plain(formatUncertain(5, 0.0996))).toBe("5.00(10)");
    expect(plain(formatUncertain(5, 0.298))).toBe("5.0(3)");
    expect(uncertaintyDecimals(0.96)).toBe(1);
    expect(plain(formatUncertain(5, 0.96))).toBe("5.0(1.0)");
  });
  it("keeps the point of an uncertainty of 1 or more beside decimals", () => {
    expect(plain(formatUncertain(896.23, 2.44))).toBe("896.2(2.4)");
  });
  it("rounds the value with a large uncertainty", () => {
    expect(plain(formatUncertain(884.4, 3.2))).toBe("884(3)");
    expect(plain(formatUncertain(12_345.6, 123))).toBe("12350(120)");
  });
  it("leaves the value alone where there is no uncertainty", () => {
    expect(formatUncertain(2.5, null, { decimals: 1 })).toBe("2.5");
    expect(formatUncertain(2.5, 0, { decimals: 2 })).toBe("2.50");
    expect(formatUncertain(2.5, Number.NaN, { decimals: 0 })).toBe("3");
    expect(formatUncertain(Number.NaN, 1)).toBe("\u2013");
  });
  it("refuses an uncertainty that is not above nought when asked for its place", () => {
    expect(() => uncertaintyDecimals(0)).toThrow(RangeError);
    expect(() => uncertaintyDecimals(Number.NaN)).toThrow(RangeError);
  });
  it("shows an uncertainty within 5 % (two digits) or 1/6 (one digit) of the true one", () => {
    fc.assert(
      fc.property(fc.double({ min: 1e-6, max: 1e5, noNaN: true }), (u) => {
        const text = plain(formatUncertain(0, u));
        const [, value = "", shown = ""] = /^(.*)\((.*)\)$/.exec(text) ?? [];
        const decimals = value.split(".")[1]?.length ?? 0;
        const read = shown.includes(".") ? Number(shown) : Number(shown) / 10 ** decimals;
        expect(Math.abs(read - u) / u).toBeLessThan(1 / 6);
      }),
    );
  });
});

describe("other quantities", () => {
  it("writes powers of ten with superscripts", () => {
    expect(formatPower(3.04e-7)).toBe("3.0\u2009×\u200910⁻⁷");
    expect(formatPower(0)).toBe("0");
    expect(superscript(-12)).toBe("⁻¹²");
  });
  it("changes from millilitres to litres at one litre", () => {
    expect(formatVolume(120)).toBe("120\u00a0mL");
    expect(formatVolume(999.6)).toBe("1.00\u00a0L");
    expect(formatVolume(1840)).toBe("1.84\u00a0L");
  });
  it("writes shares in per cent", () => expect(formatShare(0.356)).toBe("36\u00a0%"));
  it("writes counts in sentences as words up to twelve", () => {
    expect(`${capitalised(inWords(3))} ${plural(3, "rig")}`).toBe("Three rigs");
    expect(inWords(0)).toBe("no");
    expect(inWords(2288)).toBe("2\u2009288");
    expect(plural(1, "rig")).toBe("rig");
    expect(listOf(["a", "b", "c"])).toBe("a, b and c");
  });
});

it("begins a sentence with a capital, and leaves a quantity's symbol alone", () => {
  expect(asSentence("air reference: f0 is off")).toBe("Air reference: f0 is off");
  expect(asSentence("f0 in air drifts")).toBe("f0 in air drifts");
});
