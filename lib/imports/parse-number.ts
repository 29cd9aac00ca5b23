const PLAIN = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?$/;
const GROUPS = /[\u00a0\u2009\u202f' ]/g;

export type Decimal = "." | ",";

/**
 * A number as instruments write it: point or comma as chosen, an exponent, groups of digits parted by blanks or apostrophes, a
 * minus of either kind. NaN for anything else, also for what only a program would take: hexadecimal, "Infinity", an empty text.
 */
export function parseNumber(text: string, decimal: Decimal): number {
  if (decimal === "." && PLAIN.test(text)) return Number(text);
  let plain = text.trim().replace("\u2212", "-");
  if (decimal === ",") {
    if (plain.includes(".")) return NaN;
    plain = plain.replace(",", ".");
  }
  if (GROUPS.test(plain)) plain = plain.replace(GROUPS, "");
  return PLAIN.test(plain) ? Number(plain) : NaN;
}

const MISSING = new Set(["", "nan", "n/a", "na", "#n/a", "null", "-", "--"]);

/** Whether a cell says that there is no value. */
export function isMissing(text: string): boolean {
  const first = text.charCodeAt(0);
  if (first >= 48 && first <= 57) return false;
  return MISSING.has(text.trim().toLowerCase());
}
