import type { DocumentedOperation, Media, OpenApiDocument, Parameter } from "@/lib/http/openapi-types";
import { rangeInWords, schemaFields, typeInWords, type SchemaField } from "@/lib/http/schema-fields";
import { PERMISSIONS, whoMay, type Permission } from "@/lib/permissions";
import type { ProblemCode } from "@/lib/problem-types";

export type ReferenceCall = {
  id: string;
  method: string;
  path: string;
  summary: string;
  description?: string;
  /** Who may call it, in words. */
  who: string;
  parameters: (SchemaField & { where: Parameter["in"] })[];
  body?: { type: string; fields: SchemaField[]; whole?: string; examples: { summary: string; json: string }[] };
  answers: { status: string; types: string[]; fields: SchemaField[]; whole?: string; example?: string }[];
  problems: ProblemCode[];
  curl: string;
};

export type ReferenceGroup = { id: string; title: string; calls: ReferenceCall[] };

/** Parts of an address that belong under another head than their own. */
const HEADS: Readonly<Record<string, string>> = {
  "Rig agents": "Rig agents",
  me: "Own account",
  "password-resets": "Own account",
  tokens: "Own account",
  invitations: "People",
  mounts: "Sensors",
  lots: "Liquids",
  "blocked-times": "Rigs",
  loads: "Rigs",
  audit: "Audit log",
  laboratory: "Laboratory",
  health: "Longreed itself",
  "openapi.json": "Longreed itself",
};

/** The document as a person reads it: calls under heads, rig agents first. */
export function referenceOf(document: OpenApiDocument): ReferenceGroup[] {
  const groups = new Map<string, ReferenceGroup>();
  for (const [path, methods] of Object.entries(document.paths)) {
    for (const [method, operation] of Object.entries(methods)) {
      const title = headOf(operation);
      const id = title.toLowerCase().replaceAll(" ", "-");
      const group = groups.get(id) ?? { id, title, calls: [] };
      group.calls.push(callOf(method.toUpperCase(), path, operation, document.servers[0]?.url ?? ""));
      groups.set(id, group);
    }
  }
  const last = (title: string) => (title === "Rig agents" ? 0 : title === "Longreed itself" ? 2 : 1);
  return [...groups.values()].toSorted((a, b) => last(a.title) - last(b.title) || (a.title < b.title ? -1 : 1));
}

/** Schemas that calls refer to by name, followed to the end. */
export function schemasOf(document: OpenApiDocument, calls: readonly ReferenceCall[]): { name: string; fields: SchemaField[] }[] {
  const found = new Map<string, SchemaField[]>();
  const follow = (fields: readonly SchemaField[]) => {
    for (const { ref } of fields) {
      if (!ref || found.has(ref) || !document.components.schemas[ref]) continue;
      found.set(ref, schemaFields(document.components.schemas[ref]));
      follow(found.get(ref) ?? []);
    }
  };
  for (const { body, answers } of calls) follow([...(body?.fields ?? []), ...answers.flatMap(({ fields }) => fields)]);
  return [...found].map(([name, fields]) => ({ name, fields }));
}

function headOf({ tags: [tag = "api"] }: DocumentedOperation): string {
  const head = HEADS[tag] ?? tag;
  return head.charAt(0).toUpperCase() + head.slice(1);
}

function callOf(method: string, path: string, operation: DocumentedOperation, server: string): ReferenceCall {
  const [bodyType, body] = Object.entries(operation.requestBody?.content ?? {})[0] ?? [];
  const examples = Object.values(body?.examples ?? {}).map(({ summary, value }) => ({ summary, json: JSON.stringify(value, null, 2) }));
  return {
    id: operation.operationId,
    method,
    path,
    summary: operation.summary,
    description: operation.description,
    who: whoOf(operation["x-access"]),
    parameters: (operation.parameters ?? []).map(({ name, in: where, required, description, schema }) => ({
      name,
      where,
      depth: 0,
      type: typeInWords(schema),
      range: rangeInWords(schema),
      required,
      note: description ?? (typeof schema.description === "string" ? schema.description : undefined),
    })),
    body: bodyType && body ? { type: bodyType, ...fieldsOf(body), examples } : undefined,
    answers: Object.entries(operation.responses)
      .filter(([status]) => status !== "default")
      .map(([status, { content = {} }]) => ({ status, types: Object.keys(content), ...fieldsOf(Object.values(content)[0]), example: exampleOf(Object.values(content)[0]) })),
    problems: operation["x-problems"],
    curl: curlOf(method, path, operation, server, bodyType, body?.examples && Object.values(body.examples)[0]?.value),
  };
}

const exampleOf = (media: Media | undefined): string | undefined => (media?.example === undefined ? undefined : JSON.stringify(media.example, null, 2));

/** Fields where the schema is an object; its type in words where it is anything else. */
function fieldsOf(media: Media | undefined): { fields: SchemaField[]; whole?: string } {
  if (!media) return { fields: [] };
  const fields = schemaFields(media.schema);
  return fields.length > 0 ? { fields } : { fields, whole: typeInWords(media.schema) };
}

function whoOf(access: string): string {
  if (access === "public") return "anybody";
  if (access === "agent") return "a rig’s agent, with the rig’s token";
  return PERMISSIONS[access as Permission].length === 4 ? "everybody signed in" : whoMay(access as Permission);
}

function curlOf(method: string, path: string, { "x-access": access }: DocumentedOperation, server: string, type: string | undefined, example: unknown): string {
  const lines = [`curl ${server}${path.replaceAll(/\{\w+\}/g, "118")}`];
  if (method !== "GET") lines[0] = lines[0].replace("curl", `curl -X ${method}`);
  if (access !== "public") lines.push(`-H "Authorization: Bearer $TOKEN"`);
  if (type === "multipart/form-data") {
    const fields = Object.entries((example ?? {}) as Record<string, unknown>);
    lines.push("-F file=@readings.csv", ...fields.map(([name, value]) => `-F '${name}=${(typeof value === "string" ? value : JSON.stringify(value)).replaceAll("'", `'\\''`)}'`));
  } else if (example !== undefined && type) {
    lines.push(`-H "Content-Type: ${type}"`);
    lines.push(`-d '${JSON.stringify(example).replaceAll("'", `'\\''`)}'`);
  }
  return lines.join(" \\\n  ");
}
