import { capitalised, inWords, listOf, plural } from "@/lib/format";
import { formatDate } from "@/lib/format-time";
import type { LaneAnswer } from "@/lib/rigs/timeline-schema";

const MOST_NAMED = 3;

/** When rigs are free, the soonest first, and which of them need a person. */
export function rigsSentence(lanes: readonly LaneAnswer[]): string {
  const halted = lanes.filter(({ campaigns }) => campaigns.some(({ word }) => word === "Halted")).map(({ name }) => name);
  const held = lanes.filter(({ freeFrom, name }) => freeFrom === null && !halted.includes(name)).map(({ name }) => name);
  const free = lanes.filter(({ campaigns }) => campaigns.length === 0).map(({ name }) => name);
  const later = lanes
    .flatMap(({ name, campaigns, freeFrom, timeZone }) => (campaigns.length > 0 && freeFrom ? [{ name, freeFrom, timeZone }] : []))
    .toSorted((a, b) => Date.parse(a.freeFrom) - Date.parse(b.freeFrom));

  const parts: string[] = [];
  if (free.length > 0) parts.push(`${few(free)} ${plural(free.length, "is", "are")} free now`);
  const [first, ...rest] = later.slice(0, MOST_NAMED);
  if (first) parts.push([`${first.name} ${free.length > 0 ? "" : "is free "}from ${formatDate(first.freeFrom, first.timeZone)}`, ...rest.map(({ name, freeFrom, timeZone }) => `${name} from ${formatDate(freeFrom, timeZone)}`)].join(", "));
  if (parts.length === 0 && held.length > 0) parts.push(`When ${few(held)} ${plural(held.length, "is", "are")} free depends on what waits there`);
  const sentences = parts.length > 0 ? [`${capitalised(parts.join(", "))}.`] : [];
  if (halted.length > 0) sentences.push(`${capitalised(few(halted))} halted and ${plural(halted.length, "needs", "need")} a person.`);
  return sentences.join(" ");
}

const few = (names: readonly string[]) => (names.length > MOST_NAMED ? `${inWords(names.length)} rigs` : listOf(names));
