import type { Json } from "@/lib/http/openapi-types";

/** One line of a table of fields. */
export type SchemaField = {
  name: string;
  /** How far it is nested, 0 for what the body itself holds. */
  depth: number;
  /** In words: `whole number`, `time`, `list of Block`. */
  type: string;
  /** What is allowed and what stands where it is left out: `1 to 99, 1 unless given`. */
  range: string;
  required: boolean;
  note?: string;
  /** Schema of the document that the type is. */
  ref?: string;
  /** A line between alternatives, not a field. */
  between?: boolean;
};

const SAFE = Number.MAX_SAFE_INTEGER;

/** The fields of a JSON Schema, nested ones after their own; schemas of the document are named, not repeated. */
export function schemaFields(schema: Json, depth = 0): SchemaField[] {
  const variants = objectsAmong(schema);
  if (variants.length > 1) return alternatives(variants, depth);
  const [object] = variants;
  if (!object) return [];
  const required = namesOf(object.required);
  const own = Object.entries(propertiesOf(object)).flatMap(([name, property]) => field(name, property, required.includes(name), depth));
  const values = asSchema(object.additionalProperties);
  return values && Object.keys(values).length > 0 ? [...own, ...field("any name", values, false, depth)] : own;
}

/** A type in words. */
export function typeInWords(schema: Json): string {
  const ref = refOf(schema);
  if (ref) return ref;
  if (typeof schema.title === "string") return schema.title;
  if (schema.const !== undefined) return JSON.stringify(schema.const);
  if (Array.isArray(schema.enum)) return schema.enum.map((value) => JSON.stringify(value)).join(" or ");
  const members = membersOf(schema);
  if (members.length > 0) return [...new Set(members.map(typeInWords))].join(" or ");
  if (Array.isArray(schema.type)) return schema.type.map((type: unknown) => typeInWords({ type })).join(" or ");
  if (schema.type === "array") return Array.isArray(schema.prefixItems) ? `list of ${schema.prefixItems.length}` : `list of ${typeInWords(asSchema(schema.items) ?? {})}`;
  if (schema.type === "string") return { "date-time": "time", uri: "address", email: "mail address" }[String(schema.format)] ?? "text";
  return { integer: "whole number", number: "number", boolean: "true or false", object: "object", null: "null" }[String(schema.type)] ?? "anything";
}

/** What is allowed, in words; empty where anything of the type is. */
export function rangeInWords(schema: Json): string {
  const parts = [span(lower(schema), upper(schema)), span(bound(schema.minLength, "at least "), bound(schema.maxLength, "at most "), " characters"), span(bound(schema.minItems, "at least "), bound(schema.maxItems, "at most "), " of them")];
  if (schema.default !== undefined) parts.push(`${JSON.stringify(schema.default)} unless given`);
  if (typeof schema.pattern === "string" && !schema.format && !schema.title) parts.push(`matches ${schema.pattern}`);
  return parts.filter(Boolean).join(", ");
}

function field(name: string, schema: Json, required: boolean, depth: number): SchemaField[] {
  const inner = asSchema(schema.items) ?? schema;
  const line: SchemaField = {
    name,
    depth,
    type: typeInWords(schema),
    range: [rangeInWords(schema), schema.type === "array" && !refOf(inner) ? rangeInWords(inner) : ""].filter(Boolean).join("; each "),
    required: required && schema.default === undefined,
    note: typeof schema.description === "string" ? schema.description : undefined,
    ref: refOf(inner) ?? membersOf(inner).map(refOf).find(Boolean),
  };
  return [line, ...(refOf(inner) ? [] : schemaFields(inner, depth + 1))];
}

/** What all alternatives hold alike comes first, then what tells them apart. */
function alternatives(variants: readonly Json[], depth: number): SchemaField[] {
  const common = Object.entries(propertiesOf(variants[0])).filter(([name, property]) =>
    variants.every((variant) => JSON.stringify(propertiesOf(variant)[name]) === JSON.stringify(property) && namesOf(variant.required).includes(name) === namesOf(variants[0].required).includes(name)),
  );
  const shared = common.map(([name]) => name);
  const rests = variants.map((variant) => ({
    ...variant,
    properties: Object.fromEntries(Object.entries(propertiesOf(variant)).filter(([name]) => !shared.includes(name))),
  }));
  return [
    ...schemaFields({ ...variants[0], properties: Object.fromEntries(common), additionalProperties: undefined }, depth),
    ...rests.flatMap((rest, i) => {
      const fields = schemaFields(rest, depth);
      return fields.length === 0 ? [] : [{ name: i === 0 ? "either" : "or", depth, type: "", range: "", required: false, between: true }, ...fields];
    }),
  ];
}

/** The object schemas that a schema may stand for: itself, or those of its union. */
function objectsAmong(schema: Json): Json[] {
  const members = membersOf(schema);
  if (members.length > 0) return members.flatMap(objectsAmong);
  return schema.properties || asSchema(schema.additionalProperties) ? [schema] : [];
}

const asSchema = (value: unknown): Json | undefined => (typeof value === "object" && value !== null && !Array.isArray(value) ? (value as Json) : undefined);
const propertiesOf = (schema: Json) => (asSchema(schema.properties) ?? {}) as Record<string, Json>;
const namesOf = (value: unknown): readonly string[] => (Array.isArray(value) ? (value as string[]) : []);
const refOf = (schema: Json): string | undefined => (typeof schema.$ref === "string" ? schema.$ref.split("/").at(-1) : undefined);
const membersOf = (schema: Json): Json[] => [schema.anyOf, schema.oneOf].find((members): members is Json[] => Array.isArray(members)) ?? [];

const bound = (value: unknown, word: string): { value: number; word: string } | undefined => (typeof value === "number" && Math.abs(value) < SAFE ? { value, word } : undefined);
const lower = ({ minimum, exclusiveMinimum }: Json) => bound(exclusiveMinimum, "above ") ?? bound(minimum, "at least ");
const upper = ({ maximum, exclusiveMaximum }: Json) => bound(exclusiveMaximum, "below ") ?? bound(maximum, "at most ");

function span(low: ReturnType<typeof bound>, high: ReturnType<typeof bound>, unit = ""): string {
  if (low && high && low.word === "at least " && high.word === "at most ") return low.value === high.value ? `${low.value}${unit}` : `${low.value} to ${high.value}${unit}`;
  const words = [low, high].filter((end) => end !== undefined && !(unit && end.value === 0)).map((end) => `${end?.word}${end?.value}`);
  return words.length > 0 ? `${words.join(" and ")}${unit}` : "";
}
