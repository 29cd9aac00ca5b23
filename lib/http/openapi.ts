import { z } from "zod";
import type { DocumentedOperation, Json, Media, OpenApiDocument, Parameter } from "@/lib/http/openapi-types";
import { EXAMPLES } from "@/lib/http/examples";
import { ANSWER_EXAMPLES } from "@/lib/http/examples/answer-examples";
import type { Operation } from "@/lib/http/operation";
import { problemCodesOf } from "@/lib/http/problem-codes";

const METHODS = ["GET", "POST", "PUT", "PATCH", "DELETE"] as const;
type Method = (typeof METHODS)[number];

/** One route file: its address as a template, and the operations that it exports by method. */
export type DocumentedRoute = { path: string; operations: Partial<Record<Method, Operation>> };

/** The operations among what a route module exports. */
export function operationsOf(module: Record<string, unknown>): DocumentedRoute["operations"] {
  const found: DocumentedRoute["operations"] = {};
  for (const method of METHODS) {
    const handler = module[method];
    if (typeof handler === "function" && "operation" in handler) found[method] = handler.operation as Operation;
  }
  return found;
}

/** `campaigns/[id]/hold/route.ts` under `app/api` → `/api/campaigns/{id}/hold`. */
export const pathOf = (file: string): string => `/api/${file.replace(/\/?route\.ts$/, "").replaceAll(/\[(\w+)\]/g, "{$1}")}`;

/** OpenAPI 3.1 of all routes, from the schemas that validate them. */
export function openApiDocument(routes: readonly DocumentedRoute[], server: string): OpenApiDocument {
  const components: Record<string, Json> = { Problem: PROBLEM };
  const paths: OpenApiDocument["paths"] = {};
  for (const { path, operations } of routes.toSorted((a, b) => (a.path < b.path ? -1 : 1))) {
    const entries = Object.entries(operations).map(([method, operation]) => [
      method.toLowerCase(),
      describe(path, method as Method, operation, components),
    ]);
    if (entries.length > 0) paths[path] = Object.fromEntries(entries);
  }
  return {
    openapi: "3.1.0",
    info: {
      title: "Longreed",
      version: "1",
      description:
        "Two faces: /api/agent for rig agents, the rest for people and scripts. Changes are additive; unknown answer fields are to be ignored. " +
        "Times are RFC 3339 in UTC, units stand in the names. Errors are application/problem+json (RFC 9457).",
    },
    servers: [{ url: server }],
    paths,
    components: {
      schemas: components,
      securitySchemes: {
        agent: { type: "http", scheme: "bearer", description: "The rig's agent token" },
        token: { type: "http", scheme: "bearer", description: "A personal access token" },
        session: { type: "apiKey", in: "cookie", name: "longreed-session", description: "The browser's session; changes need an Origin of Longreed itself" },
      },
    },
  };
}

function describe(path: string, method: Method, operation: Operation, components: Record<string, Json>): DocumentedOperation {
  const { access, summary, description, status } = operation;
  const id = operationId(method, path);
  const agent = access === "agent";
  const call = `${method} ${path}`;
  const schemaOf = (schema: z.ZodType, io: "input" | "output", part: string) => jsonSchema(schema, io, `${id}_${part}`, components);
  const content = (schema: Json, types: readonly string[]): Record<string, Media> => Object.fromEntries(types.map((type) => [type, { schema }]));

  const parameters = [
    ...pathParameters(path, operation, schemaOf),
    ...(operation.query ? parametersOf(schemaOf(operation.query, "input", "query"), "query") : []),
    ...(agent ? [header("Agent-Session", "The session that hello gave; without it there is one implicit session", 64)] : []),
    ...(!agent && method === "POST" && access !== "public"
      ? [header("Idempotency-Key", "The same key again gets the first answer, for 30 days; with another body 422", 255)]
      : []),
  ];
  const answer = operation.answer
    ? content(schemaOf(operation.answer, "output", "answer"), ["application/json"])
    : content({}, operation.produces ?? ["application/json"]);
  const extra = operation.answer && operation.produces ? content({ type: "string" }, operation.produces) : {};
  const shown = Object.fromEntries(Object.entries({ ...answer, ...extra }).map(([type, media]) => [type, { ...media, example: ANSWER_EXAMPLES[call]?.[type] }]));
  const empty = !operation.answer && !operation.produces;
  const mayBeEmpty = operation.answer?.safeParse(undefined).success;

  return {
    operationId: id,
    summary,
    ...(description && { description }),
    tags: [agent ? "Rig agents" : (path.split("/")[2] ?? "api")],
    "x-access": access,
    "x-problems": problemCodesOf(call, operation),
    security: access === "public" ? [] : agent ? [{ agent: [] }] : [{ session: [] }, { token: [] }],
    ...(parameters.length > 0 && { parameters }),
    ...(operation.body && { requestBody: { content: withExamples(content(schemaOf(operation.body, "input", "body"), ["application/json"]), EXAMPLES[call]) } }),
    ...(operation.form && { requestBody: { content: withExamples(content(withFile(schemaOf(operation.form, "input", "form")), ["multipart/form-data"]), EXAMPLES[call]) } }),
    responses: {
      [empty && status === 200 ? "204" : String(status)]: { description: summary, ...(!empty && { content: shown }) },
      ...Object.fromEntries(Object.entries(operation.otherwise ?? {}).map(([code, means]) => [code, { description: means, content: shown }])),
      ...(mayBeEmpty && { 204: { description: "Nothing is in it" } }),
      default: { description: "A problem, see its type", content: { "application/problem+json": { schema: { $ref: "#/components/schemas/Problem" }, example: PROBLEM_EXAMPLE } } },
    },
  };
}

function withExamples(content: Record<string, Media>, examples: Readonly<Record<string, unknown>> = {}): Record<string, Media> {
  const named = Object.entries(examples).map(([summary, value]) => [summary.replaceAll(/\W+/g, "-"), { summary, value }]);
  if (named.length === 0) return content;
  return Object.fromEntries(Object.entries(content).map(([type, media]) => [type, { ...media, examples: Object.fromEntries(named) }]));
}

/** The fields of an upload with the file that they are beside. */
const withFile = (fields: Json): Json => ({
  ...fields,
  required: ["file", ...(Array.isArray(fields.required) ? fields.required : [])],
  properties: { file: { type: "string", contentMediaType: "application/octet-stream", description: "The file itself" }, ...(fields.properties as Json) },
});

const header = (name: string, description: string, maxLength: number): Parameter => ({
  name,
  in: "header",
  required: false,
  description,
  schema: { type: "string", maxLength },
});

function pathParameters(path: string, { params }: Operation, schemaOf: (schema: z.ZodType, io: "input", part: string) => Json): Parameter[] {
  const given = params ? parametersOf(schemaOf(params, "input", "params"), "path") : [];
  const missing = [...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name).filter((name) => !given.some((parameter) => parameter.name === name));
  return [...given, ...missing.map((name): Parameter => ({ name, in: "path", required: true, schema: { type: "string" } }))];
}

function parametersOf(schema: Json, where: "path" | "query"): Parameter[] {
  const required = Array.isArray(schema.required) ? schema.required : [];
  return Object.entries((schema.properties ?? {}) as Record<string, Json>).map(([name, property]) => ({
    name,
    in: where,
    required: where === "path" || (required.includes(name) && property.default === undefined),
    schema: property,
  }));
}

const operationId = (method: string, path: string) =>
  method.toLowerCase() + path.slice(4).replaceAll(/[/{}.-]+(\w?)/g, (_, letter: string) => letter.toUpperCase());

/**
 * A zod schema as JSON Schema 2020-12. What the schema defines for itself (recursion, schemas with an id) moves to the
 * document's components, where references resolve.
 */
function jsonSchema(schema: z.ZodType, io: "input" | "output", name: string, components: Record<string, Json>): Json {
  const made = z.toJSONSchema(schema, { io, unrepresentable: "any" }) as Json;
  const { $defs, ...own } = made;
  delete own.$schema;
  const rename = (key: string) => (key.startsWith("__schema") ? `${name}_${key.slice(8)}` : key);
  const root = JSON.stringify(own).includes('"$ref":"#"');
  const moved = (value: unknown): unknown => {
    if (Array.isArray(value)) return value.map(moved);
    if (typeof value !== "object" || value === null) return value;
    return Object.fromEntries(
      Object.entries(value).map(([key, inner]) => {
        if (key !== "$ref" || typeof inner !== "string") return [key, moved(inner)];
        const target = inner === "#" ? name : rename(inner.replace("#/$defs/", ""));
        return [key, `#/components/schemas/${target}`];
      }),
    );
  };
  for (const [key, definition] of Object.entries(($defs ?? {}) as Json)) components[rename(key)] = moved(definition) as Json;
  if (!root) return moved(own) as Json;
  components[name] = moved(own) as Json;
  return { $ref: `#/components/schemas/${name}` };
}

const PROBLEM: Json = {
  type: "object",
  description: "RFC 9457. `type` is /problems/<code>; further members by code.",
  required: ["type", "title", "status", "detail"],
  properties: {
    type: { type: "string" },
    title: { type: "string" },
    status: { type: "integer" },
    detail: { type: "string" },
    errors: {
      type: "array",
      items: { type: "object", required: ["path", "message"], properties: { path: { type: "string" }, message: { type: "string" } } },
    },
  },
};

const PROBLEM_EXAMPLE: Json = {
  type: "/problems/invalid",
  title: "The request is not valid",
  status: 400,
  detail: "limit: Too big: expected number to be <=200",
  errors: [{ path: "limit", message: "Too big: expected number to be <=200" }],
};
