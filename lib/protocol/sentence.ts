import { duration, untilText } from "./labels";

/** A block or limit as it is being written: any field may be missing or wrong. */
export type LooseFields = { readonly [field: string]: unknown };

/** Words, or a value that the block's field at `path` holds. */
export type SentencePart = string | { value: string; path: string };

/** What stands where a value is missing. */
const MISSING = "…";

/** A block as a sentence in parts, so that a page can mark and open its values. Never throws: what is missing reads `…`. */
export function sentenceParts(given: object): SentencePart[] {
  const block: LooseFields = { ...given };
  const value = (path: string, write: (held: unknown) => string = plain) => ({ value: write(at(block, path)), path });
  const seconds = (path: string) => value(path, asDuration);
  const counted = (path: string, unit: string) => value(path, (n) => count(n, unit));
  const optional = (path: string, parts: () => SentencePart[]) => (at(block, path) === undefined ? [] : parts());

  switch (block.kind) {
    case "measure": {
      const role = at(block, "role") ?? (block.medium === "air" ? "reference" : "sample");
      const inAir = block.medium === "air";
      return [
        "Measure ",
        value("medium", slotName),
        ...(role === "sample" && !inAir ? [] : [" as ", { value: role === "reference" && inAir ? "the reference" : `a ${plain(role)}`, path: "role" }]),
        ", ",
        counted("repeats", "repeat"),
        ...(isAbove0(block.discard) ? [", the first ", value("discard"), " left out"] : []),
        ...(isAbove0(block.pauseS) ? [", ", seconds("pauseS"), " apart"] : []),
        ".",
      ];
    }
    case "fill":
      return ["Fill ", value("volumeMl", ml), " of ", value("slot", slotName), " at ", value("flowMlPerMin", flow), "."];
    case "drain":
      return ["Drain the cell."];
    case "rinse":
      return ["Rinse ", counted("times", "time"), " with ", value("volumeMl", ml), " of ", value("slot", slotName), "."];
    case "dry":
      return ["Dry for ", seconds("seconds"), ...optional("flowMlPerMin", () => [" at ", value("flowMlPerMin", flow)]), "."];
    case "settle":
      return [
        "Settle at ",
        value("temperatureC", (t) => (t === "each" ? "each temperature" : `${plain(t)} °C`)),
        " within ",
        value("toleranceC", (t) => `${plain(t)} °C`),
        " for ",
        seconds("holdS"),
        ", at most ",
        seconds("timeoutS"),
        ".",
      ];
    case "wait":
      return block.until === undefined ? ["Wait ", seconds("seconds"), "."] : ["Wait until ", value("until", asUntil), "."];
    case "ask":
      return ["Ask a person: ", value("instruction")];
    case "repeat":
      return block.until === undefined ? ["Repeat ", counted("times", "time"), "."] : ["Repeat until ", value("until"), " is over."];
    case "untilClean":
      return [
        "Clean until air is back within ",
        value("tolerancePpm", (p) => `${plain(p)} ppm`),
        ...optional("toleranceQPercent", () => [" and ", value("toleranceQPercent", (p) => `${plain(p)} %`), " in Q"]),
        ", at most ",
        counted("maxTimes", "time"),
        ", otherwise ",
        value("otherwise", (otherwise) => (otherwise === "continue" ? "go on" : plain(otherwise))),
        ".",
      ];
    case "forEach":
      return at(block, "over.slots") === undefined
        ? ["At each of ", value("over.temperaturesC", list), " °C."]
        : ["For each of ", value("over.slots", list), "."];
    default:
      return [MISSING];
  }
}

/** How a measurement sweeps, as a second sentence. */
export function sweepParts(block: object): SentencePart[] {
  const value = (path: string, write: (given: unknown) => string = plain) => ({ value: write(at(block, path)), path });
  const centre = at(block, "sweep.centre");
  return [
    "Sweep ",
    { value: centre === "track" ? "around the last good fit" : `around ${plain(centre)} Hz`, path: "sweep.centre" },
    ", ",
    at(block, "sweep.span.hz") === undefined ? value("sweep.span.halfWidths", (n) => count(n, "half-width")) : value("sweep.span.hz", (hz) => `${plain(hz)} Hz`),
    " wide, ",
    value("sweep.points", (n) => count(n, "point")),
    " of ",
    at(block, "sweep.dwell.s") === undefined ? value("sweep.dwell.ringDowns", (n) => count(n, "ring-down")) : value("sweep.dwell.s", (s) => `${plain(s)} s`),
    ", driven with ",
    value("sweep.driveV", (v) => `${plain(v)} V`),
    ".",
  ];
}

export const textOf = (parts: readonly SentencePart[]): string => parts.map((part) => (typeof part === "string" ? part : part.value)).join("");

/** The value at a dotted path; undefined where nothing is. */
export function at(given: unknown, path: string): unknown {
  return path.split(".").reduce<unknown>((inner, key) => (typeof inner === "object" && inner !== null ? (inner as LooseFields)[key] : undefined), given);
}

export function count(n: unknown, unit: string): string {
  return `${typeof n === "number" ? n.toLocaleString("en").replaceAll(",", " ") : plain(n)} ${unit}${n === 1 ? "" : "s"}`;
}

export function plain(given: unknown): string {
  return typeof given === "string" && given.trim() !== "" ? given : typeof given === "number" ? String(given) : MISSING;
}

export const asDuration = (given: unknown): string => (typeof given === "number" && Number.isFinite(given) && given >= 0 ? duration(given) : plain(given));
const isAbove0 = (given: unknown) => given !== undefined && given !== 0;
const ml = (given: unknown) => `${plain(given)} mL`;
const flow = (given: unknown) => `${plain(given)} mL/min`;
const slotName = (given: unknown) => (given === "each" ? "each liquid" : plain(given));
const list = (given: unknown) => (Array.isArray(given) && given.length > 0 ? given.map(plain).join(", ") : MISSING);

function asUntil(given: unknown): string {
  const weekday = at(given, "weekday");
  return untilText({ time: plain(at(given, "time")), ...(typeof weekday === "number" && weekday >= 1 && weekday <= 7 && { weekday }) });
}
