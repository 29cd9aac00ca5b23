export type Place = { path: readonly (string | number)[]; value: unknown };

/** Every place inside a body, the body itself left out. */
export function* placesIn(value: unknown, path: readonly (string | number)[] = []): Generator<Place> {
  if (path.length > 0) yield { path, value };
  if (value && typeof value === "object") for (const [key, inner] of Object.entries(value)) yield* placesIn(inner, [...path, Array.isArray(value) ? Number(key) : key]);
}

const MARK = "\u241f";

/** The body as JSON with another JSON text at one place, which may be one that it does not have yet. */
export function withText(body: unknown, at: readonly (string | number)[], text: string): string {
  const copy = structuredClone(body) as Record<string | number, unknown>;
  let inner = copy;
  for (const key of at.slice(0, -1)) inner = inner[key] as Record<string | number, unknown>;
  inner[at[at.length - 1]] = MARK;
  return JSON.stringify(copy).replace(JSON.stringify(MARK), () => text);
}

/** The body as JSON without what stands at one place. */
export function without(body: unknown, at: readonly (string | number)[]): string {
  const copy = structuredClone(body) as Record<string | number, unknown>;
  let inner = copy;
  for (const key of at.slice(0, -1)) inner = inner[key] as Record<string | number, unknown>;
  const last = at[at.length - 1];
  if (Array.isArray(inner)) inner.splice(Number(last), 1);
  else delete inner[last];
  return JSON.stringify(copy);
}

/** What people type who mean harm or paste from elsewhere; all of it may be stored and has to come back as it was. */
export const HOSTILE_TEXTS = [
  "'; drop table campaign; --",
  '" or 1=1 /*',
  "<script>alert(1)</script>",
  '<img src=x onerror="alert(1)">',
  "=cmd|' /C calc'!A0",
  "@SUM(1+1)*cmd",
  "\u202egnp.exe\u202c",
  "\u200b\u200d\ufeff",
  "Z\u0351\u036b\u0343\u036a\u0302\u036b\u033d\u034f\u0334\u0319\u0324\u031e\u0349\u035a\u032f\u031e\u0320\u034dA\u036b\u0357\u0334\u0362\u0335\u031c\u0330\u0354L\u0368\u0367\u0369\u0358\u0320G",
  "%00%0a%0d",
  "../../../../etc/passwd",
  "${7*7}{{7*7}}",
  "$1 $$name :replacement ?",
  "\\u0000 \\x00 \\",
  "🧪👩‍🔬𝔘𝔫𝔦",
  "\u0001\u001b[31m",
  "line\r\nSet-Cookie: a=b",
  "constructor",
  "__proto__",
  "NaN",
  "null",
] as const;

/** JSON texts that no field of ours is meant to hold, or only just. */
export const WRONG_JSON = [
  "null",
  "true",
  "false",
  "0",
  "-0",
  "-1",
  "1.5",
  "1e999",
  "-1e999",
  "1e308",
  "-1e308",
  "5e-324",
  "9007199254740993",
  "2147483648",
  "[]",
  "{}",
  "[[]]",
  "[null]",
  '{"__proto__":{"admin":true}}',
  '{"constructor":{"prototype":{}}}',
  '""',
  '" "',
  '"0"',
  '"-1"',
  '"1"',
  '"NaN"',
  '"Infinity"',
  '"1e999"',
  '"１"',
  '"\\u0000"',
  '"a\\u0000b"',
  '"\\ud800"',
  '{"a\\u0000":1}',
  '"9223372036854775807"',
  '"9223372036854775808"',
  '"0000-01-01T00:00:00Z"',
  '"9999-12-31T23:59:59.999999999-23:59"',
  '"2026-02-30T00:00:00Z"',
  '"2026-05-14"',
  '"24:00"',
  '"2016-12-31T23:59:60Z"',
  JSON.stringify("x".repeat(201)),
  JSON.stringify("y".repeat(70_000)),
  `[${"null,".repeat(5000)}null]`,
  `${"[".repeat(3000)}${"]".repeat(3000)}`,
  `${'{"a":'.repeat(3000)}1${"}".repeat(3000)}`,
  ...HOSTILE_TEXTS.map((text) => JSON.stringify(text)),
] as const;
