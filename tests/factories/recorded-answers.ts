import fs from "node:fs";
import path from "node:path";

const FILE = path.resolve(import.meta.dirname, "../../lib/http/examples/answer-examples.json");

/** Names of the factories, and those that a reader of the reference sees in their place: the first of an answer, the second, the rest. */
const NAMES: readonly [RegExp, readonly string[]][] = [
  [/\bRig \d+\b/g, ["North bench", "South bench", "East bench"]],
  [/\bPerson \d+\b/g, ["J. Pellick", "R. Askelund", "M. Torvald"]],
  [/\bperson-\d+@/g, ["j.pellick@", "r.askelund@", "m.torvald@"]],
  [/\bguest-\d+@/g, ["n.ostrander@", "l.fenwick@", "t.marlow@"]],
  [/\bLiquid \d+\b/g, ["Brine", "2-Propanol", "Water, degassed"]],
  [/\bCampaign \d+\b/g, ["Ageing in brine", "Three fills of 2-propanol", "Reference in air"]],
  [/\bProtocol \d+\b/g, ["Three fills", "Ageing", "Air only"]],
  [/lr_([a-z]+)_[\w-]{43}/g, ["lr_$1_shown-this-once"]],
];

/** The text with the factories' names replaced, the same by the same. */
function renamed(text: string): string {
  return NAMES.reduce((given, [pattern, names]) => {
    const found = [...new Set(given.match(pattern) ?? [])];
    if (names.length === 1) return given.replaceAll(pattern, names[0]);
    return given.replaceAll(pattern, (name) => names[Math.min(found.indexOf(name), names.length - 1)]);
  }, text);
}

/** What a reader could make nothing of. */
export const isBinary = (type: string): boolean => type.startsWith("application/vnd.");

const recorded: Record<string, Record<string, unknown>> = {};

/** Keeps the first answer of a call for the reference. */
export function recordAnswer(call: string, type: string, text: string): void {
  if (isBinary(type)) return;
  const answer: unknown = type === "application/json" ? shortened(JSON.parse(renamed(text))) : renamed(text).split("\n").slice(0, 3).join("\n");
  (recorded[call] ??= {})[type] ??= answer;
}

/** Calls that were not sent this time keep what they had. */
export function writeRecorded(): void {
  const before = JSON.parse(fs.readFileSync(FILE, "utf8")) as typeof recorded;
  const sorted = Object.fromEntries(Object.entries({ ...before, ...recorded }).toSorted(([a], [b]) => (a < b ? -1 : 1)));
  fs.writeFileSync(FILE, `${JSON.stringify(sorted, null, 1)}\n`);
}

function shortened(value: unknown): unknown {
  if (Array.isArray(value)) return value.slice(0, value.every((one) => typeof one === "number") ? 4 : 2).map(shortened);
  if (typeof value !== "object" || value === null) return value;
  const entries = Object.entries(value);
  return Object.fromEntries((entries.some(([name]) => name.startsWith("/")) ? [] : entries).map(([name, inner]) => [name, name === "schemas" ? {} : shortened(inner)]));
}
