import { FIELD_NAMES, FIELDS, fieldInfo, type Field } from "@/lib/imports/fields";
import type { Mapping } from "@/lib/imports/schema";

export type Layout = "values" | "points" | "sweeps";

export type UsedColumn = { index: number; name: string; field: Field; unit: string | undefined };

export type Columns = { layout: Layout; used: UsedColumn[]; ignored: string[] };

export type ColumnError = { path: string; message: string };

/**
 * What each column of a file is: as the mapping says, else by a name that is a field's own, in any case. The layout follows: values
 * where f0 is given, one line a point where the frequency is, one line a sweep where its first and last frequency are.
 */
export function columnsOf(header: readonly string[], mapping: Mapping, options: { medium?: string }): Columns | { errors: ColumnError[] } {
  const names = header.map((name) => name.trim());
  const errors: ColumnError[] = Object.keys(mapping)
    .filter((name) => !names.includes(name.trim()))
    .map((name) => ({ path: `mapping.${name}`, message: `the file has no column “${name}”; it has ${listed(names)}` }));
  const mapped = new Map(Object.entries(mapping).map(([name, use]) => [name.trim(), use]));
  const taken = new Set([...mapped.values()].flatMap((use) => (use ? [use.field] : [])));
  const used: UsedColumn[] = [];
  const ignored: string[] = [];
  names.forEach((name, index) => {
    const use = mapped.get(name);
    const own = FIELD_NAMES.find((one) => one.toLowerCase() === name.toLowerCase());
    const fieldOf = use?.field ?? (use === undefined && own && !taken.has(own) ? own : undefined);
    if (!fieldOf) return void (name !== "" && ignored.push(name));
    const before = used.find((column) => column.field === fieldOf);
    if (before) errors.push({ path: `mapping.${name}`, message: `“${before.name}” is ${fieldOf} already` });
    else used.push({ index, name, field: fieldOf, unit: use?.unit });
  });
  const has = (...fields: Field[]) => fields.every((one) => used.some((column) => column.field === one));
  const layout = layoutOf(has);
  errors.push(...missing(has, layout, options.medium, names));
  return errors.length > 0 ? { errors } : { layout, used, ignored };
}

function layoutOf(has: (...fields: Field[]) => boolean): Layout {
  if (has("startHz") || has("stopHz")) return "sweeps";
  return has("frequencyHz") && !has("f0Hz") ? "points" : "values";
}

function missing(has: (...fields: Field[]) => boolean, layout: Layout, medium: string | undefined, names: readonly string[]): ColumnError[] {
  const errors: ColumnError[] = [];
  const need = (field: Field) => {
    if (!has(field)) errors.push({ path: field, message: `no column is ${field} (${FIELDS[field].words}); the file has ${listed(names)}` });
  };
  need("takenAt");
  if (medium === undefined) need("medium");
  if (layout === "values") {
    need("f0Hz");
    need("q");
  } else if (layout === "sweeps") {
    need("startHz");
    need("stopHz");
  }
  if (layout !== "values" && has("magnitude") === (has("re") || has("im"))) errors.push({ path: "re", message: "a sweep has either re and im, or magnitude" });
  else if (layout !== "values" && has("re") !== has("im")) need(has("re") ? "im" : "re");
  return errors;
}

const listed = (names: readonly string[]): string => {
  const shown = names.slice(0, 12).map((name) => `“${name.slice(0, 40)}”`).join(", ");
  return names.length > 12 ? `${shown} and ${names.length - 12} more` : shown;
};

/** The mapping that the names of the columns speak for, with the unit where a name tells it: `f0 (kHz)`. Only a beginning: a person looks at it. */
export function suggestMapping(header: readonly string[]): Mapping {
  const mapping: Mapping = {};
  const taken = new Set<Field>();
  for (const given of header) {
    const name = given.trim();
    if (name === "" || name in mapping) continue;
    const unitText = /[([/]\s*([^()[\]/]+?)\s*[)\]]?$/.exec(name)?.[1] ?? /_(Hz|kHz|MHz|mHz|K|C|F|Pa|hPa|mbar|bar|V|mV)$/.exec(name)?.[1];
    const bare = plain(name.replace(/\s*[([/].*$/, "").replace(/_(Hz|kHz|MHz|mHz|K|C|F|Pa|hPa|mbar|bar|V|mV)$/, ""));
    // A bare T is a time unless it is told in degrees.
    const found = bare === "t" && inDegrees(unitText) ? "temperatureC" : FIELD_NAMES.find((field) => plain(field) === plain(name)) ?? FIELD_NAMES.find((field) => !taken.has(field) && fieldInfo(field).names.includes(bare));
    if (!found || taken.has(found)) continue;
    taken.add(found);
    const units = fieldInfo(found).units;
    const unit = units.length > 1 ? (units.find((one) => one.name === unitText || one.name === `°${unitText ?? ""}`) ?? units[0]).name : undefined;
    mapping[name] = { field: found, unit };
  }
  return mapping;
}

const inDegrees = (unit: string | undefined): boolean => unit !== undefined && /^°?[CKF]$/.test(unit);

const plain = (name: string): string => name.toLowerCase().replaceAll("₀", "0").replaceAll(/[^a-zäöü0-9]/g, "");
