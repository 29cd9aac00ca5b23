import { formatNumber, NO_VALUE } from "@/lib/format";

/** One line of what an event says: a field with its value, or with the value before and after. */
export type DetailLine = { field: string; from?: string; to: string };

/** What stands for an id: `nameOf("rig", "7")` → "North bench"; undefined where it is not known any more. */
export type NameOf = (kind: string, id: string) => string | undefined;

/** Kinds of things behind names of fields that hold an id. */
const KINDS: Readonly<Record<string, string>> = {
  rigId: "rig",
  sensorId: "sensor",
  liquidId: "liquid",
  lotId: "lot",
  campaignId: "campaign",
  madeWayFor: "campaign",
  line: "campaign",
  protocolId: "protocol",
  protocolVersionId: "version",
  versionId: "version",
  personId: "person",
};

/** Ids that tell a reader nothing: what they name has no name. */
const WITHOUT_NAME: ReadonlySet<string> = new Set(["mountId", "noteId", "ended"]);

const UNITS: readonly [RegExp, string][] = [[/Ml$/, "mL"], [/Hz$/, "Hz"], [/KgM3$/, "kg/m³"], [/MPaS$/, "mPa·s"], [/(?<=radius)M$/, "m"], [/(?<=flashPoint|temperature)C$/, "°C"]];

type Detail = Readonly<Record<string, unknown>>;

/** The kind of thing that the ids of a field name; `before` is one only where a campaign was moved in line. */
export function kindOfField(field: string, detail: Detail): string | undefined {
  return KINDS[field] ?? (field === "before" && typeof detail.before === "string" ? "campaign" : undefined);
}

/** The detail of an event as lines to read, ids as names and units beside their fields. What is empty has no line, unless it was changed to that. */
export function detailLines(action: string, detail: Detail, nameOf: NameOf): DetailLine[] {
  const { before, after, from, to, ...rest } = detail;
  const said = (field: string, value: unknown) => inWords(field, value, nameOf, detail);
  const lines: DetailLine[] = [];
  if (isObject(before) && isObject(after))
    for (const field of Object.keys(after)) lines.push({ field: fieldInWords(field), from: said(field, before[field]), to: said(field, after[field]) });
  else if (before !== undefined && after !== undefined) lines.push({ field: CHANGED[action] ?? "", from: said("", before), to: said("", after) });
  else if (from !== undefined && to !== undefined && action !== "block time") lines.push({ field: CHANGED[action] ?? "", from: said("", from), to: said("", to) });
  else for (const [field, value] of Object.entries({ before, from, to })) if (isSaid(value)) lines.push({ field, to: said(field, value) });

  for (const [field, value] of Object.entries(rest)) {
    if (!isSaid(value) || WITHOUT_NAME.has(field)) continue;
    if (isChange(value)) lines.push({ field: fieldInWords(field), from: said(field, value.from), to: said(field, value.to) });
    else lines.push({ field: fieldInWords(field), to: said(field, value) });
  }
  return lines;
}

/** What an action changed that notes the value before and after without a name. */
const CHANGED: Readonly<Record<string, string>> = { rename: "name", "change role": "role", "replace agent": "agent" };

/** `wasteCapacityMl` → "waste capacity / mL", `rigId` → "rig". */
export function fieldInWords(field: string): string {
  const unit = UNITS.find(([pattern]) => pattern.test(field));
  const bare = unit ? field.replace(unit[0], "") : field.replace(/(?<=.)(Id|At)$/, "");
  const words = bare.replaceAll(/(?<=[a-z0-9])([A-Z])/g, (_, letter: string) => ` ${letter.toLowerCase()}`);
  return unit ? `${words} / ${unit[1]}` : words;
}

function inWords(field: string, value: unknown, nameOf: NameOf, detail: Detail): string {
  if (value === null || value === undefined || value === "") return NO_VALUE;
  if (typeof value === "boolean") return value ? "yes" : "no";
  if (typeof value === "number") return formatNumber(value);
  const kind = kindOfField(field, detail);
  if (typeof value === "string") return (kind && nameOf(kind, value)) ?? value;
  if (Array.isArray(value)) {
    if (value.length === 0) return NO_VALUE;
    return value.some(isObject) ? `${value.length} ${value.length === 1 ? "entry" : "entries"}` : value.map((one) => inWords(field, one, nameOf, detail)).join(", ");
  }
  const parts = Object.entries(value).filter(([, inner]) => isSaid(inner)).map(([name, inner]) => `${fieldInWords(name)} ${inWords(name, inner, nameOf, detail)}`);
  return parts.length > 0 ? parts.join(", ") : NO_VALUE;
}

const isObject = (value: unknown): value is Record<string, unknown> => typeof value === "object" && value !== null && !Array.isArray(value);
const isChange = (value: unknown): value is { from: unknown; to: unknown } => isObject(value) && "from" in value && "to" in value && Object.keys(value).length === 2;
const isSaid = (value: unknown): boolean => value !== null && value !== undefined;
