/** Numbers, uncertainties and times as they stand on the page and in mail: pure, the same on server and browser. */

export const THIN_SPACE = "\u2009";
export const MINUS = "\u2212";
export const NO_VALUE = "\u2013";

const group = (integer: string) => integer.replace(/\B(?=(\d{3})+$)/g, THIN_SPACE);
const groupFraction = (fraction: string) => fraction.replace(/(\d{3})(?=\d)/g, `$1${THIN_SPACE}`);

/** `1 234.567 8`: groups of three on both sides of the point, U+2212 as minus. `signed` writes the plus too. Not finite: an en dash. */
export function formatNumber(value: number, options: { decimals?: number; signed?: boolean } = {}): string {
  if (!Number.isFinite(value)) return NO_VALUE;
  const { decimals, signed = false } = options;
  const digits = decimals === undefined ? plainDigits(Math.abs(value)) : Math.abs(value).toFixed(Math.max(0, decimals));
  const isZero = !/[1-9]/.test(digits);
  const [integer = "0", fraction = ""] = digits.split(".");
  const sign = isZero ? "" : value < 0 ? MINUS : signed ? "+" : "";
  return sign + group(integer) + (fraction ? `.${groupFraction(fraction)}` : "");
}

/** Up to 15 significant digits without an exponent. */
const plainDigits = (value: number) => {
  const shortest = String(Number(value.toPrecision(15)));
  return shortest.includes("e") ? value.toFixed(20).replace(/\.?0+$/, "") : shortest;
};

export const formatCount = (n: number): string => formatNumber(Math.round(n), { decimals: 0 });

/** The decimal place (1 = tenths, −1 = tens) to which an uncertainty is written. `digits`: 1, 2, or two only when the first is 1 or 2. */
export function uncertaintyDecimals(u: number, digits: 1 | 2 | "auto" = "auto"): number {
  if (!(u > 0) || !Number.isFinite(u)) throw new RangeError(`an uncertainty is a number above 0, got ${u}`);
  const one = rounded(u, 1);
  const two = rounded(u, 2);
  const carried = one.mantissa === 1 && two.mantissa >= 3;
  if (digits === 2 || (digits === "auto" && two.mantissa < 3)) return 1 - two.power;
  return digits === "auto" && carried ? 1 - one.power : -one.power;
}

const rounded = (u: number, digits: 1 | 2) => {
  const [mantissa, power] = u.toExponential(digits - 1).split("e").map(Number);
  return { mantissa: mantissa ?? 1, power: power ?? 0 };
};

/**
 * A value with its standard uncertainty in the last digits: `1 234.567 8(12)`.
 * An uncertainty of 1 or more beside decimals keeps its point, `896.2(2.4)`; one of 10 or more rounds the value too, `12 340(120)`.
 * Without an uncertainty above 0 the value stands alone with `decimals`.
 */
export function formatUncertain(value: number, u: number | null | undefined, options: { digits?: 1 | 2 | "auto"; signed?: boolean; decimals?: number } = {}): string {
  const { digits = "auto", signed, decimals } = options;
  if (!Number.isFinite(value)) return NO_VALUE;
  if (u == null || !(u > 0) || !Number.isFinite(u)) return formatNumber(value, { decimals, signed });
  const places = uncertaintyDecimals(u, digits);
  if (places <= 0) {
    const step = 10 ** -places;
    return `${formatNumber(Math.round(value / step) * step, { decimals: 0, signed })}(${formatNumber(Math.round(u / step) * step, { decimals: 0 })})`;
  }
  const shown = Number(u.toFixed(places));
  const inDigits = shown >= 1 ? shown.toFixed(places) : String(Math.round(u * 10 ** places));
  return `${formatNumber(value, { decimals: places, signed })}(${inDigits})`;
}

/** `3.0 × 10⁻⁷`, for text that cannot hold a superscript element. Zero is `0`. */
export function formatPower(value: number, decimals = 1): string {
  if (!Number.isFinite(value)) return NO_VALUE;
  if (value === 0) return "0";
  const [mantissa = "", exponent = "0"] = value.toExponential(decimals).split("e");
  return `${mantissa.replace("-", MINUS)}${THIN_SPACE}×${THIN_SPACE}10${superscript(Number(exponent))}`;
}

const SUPERSCRIPTS = "⁰¹²³⁴⁵⁶⁷⁸⁹";
export const superscript = (n: number): string =>
  (n < 0 ? "⁻" : "") + [...String(Math.abs(Math.trunc(n)))].map((digit) => SUPERSCRIPTS[Number(digit)]).join("");

/** `120 mL`, from a litre on `1.84 L`. */
export const formatVolume = (ml: number): string =>
  !Number.isFinite(ml) ? NO_VALUE : Math.abs(ml) < 999.5 ? `${formatNumber(ml, { decimals: 0 })}\u00a0mL` : `${formatNumber(ml / 1000, { decimals: 2 })}\u00a0L`;

/** `12.5 %` from a share of 1. */
export const formatShare = (share: number, decimals = 0): string => (Number.isFinite(share) ? `${formatNumber(share * 100, { decimals })}\u00a0%` : NO_VALUE);

const WORDS = ["no", "one", "two", "three", "four", "five", "six", "seven", "eight", "nine", "ten", "eleven", "twelve"];

/** Counts in sentences are words up to twelve: `three rigs`. */
export const inWords = (n: number): string => WORDS[n] ?? formatCount(n);
export const capitalised = (text: string): string => text.charAt(0).toUpperCase() + text.slice(1);

/** The same for a text that may begin with a quantity: `f0 in air drifts` stays. */
export const asSentence = (text: string): string => (/^f0\b/.test(text) ? text : capitalised(text));
export const plural = (n: number, one: string, many = `${one}s`): string => (n === 1 ? one : many);
/** `a, b and c`. */
export const listOf = (items: readonly string[]): string => (items.length < 2 ? (items[0] ?? "") : `${items.slice(0, -1).join(", ")} and ${items[items.length - 1]}`);
