import fs from "node:fs";
import path from "node:path";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { z } from "zod";
import { GET } from "@/app/api/openapi.json/route";
import { sequelize } from "@/lib/db";
import { pathOf } from "@/lib/http/openapi";
import { at, request } from "../../factories/session";

afterAll(() => sequelize.close());

const schema = z.union([z.boolean(), z.record(z.string(), z.unknown())]);
const parameter = z.object({ name: z.string(), in: z.enum(["path", "query", "header"]), required: z.boolean(), schema });
const content = z.record(z.string().regex(/^[\w.+-]+\/[\w.+*-]+$/), z.object({ schema }));
const operation = z.object({
  operationId: z.string().regex(/^[a-zA-Z]\w+$/),
  summary: z.string().min(5),
  tags: z.array(z.string()),
  security: z.array(z.record(z.string(), z.array(z.string()))),
  parameters: z.array(parameter).optional(),
  requestBody: z.object({ content }).optional(),
  responses: z.record(z.string().regex(/^([1-5]\d\d|default)$/), z.object({ description: z.string(), content: content.optional() })),
});
const documentSchema = z.object({
  openapi: z.string().regex(/^3\.1\.\d$/),
  info: z.object({ title: z.string(), version: z.string() }),
  servers: z.array(z.object({ url: z.url() })),
  paths: z.record(z.string().startsWith("/"), z.partialRecord(z.enum(["get", "post", "put", "patch", "delete"]), operation)),
  components: z.object({ schemas: z.record(z.string().regex(/^[\w.-]+$/), schema), securitySchemes: z.record(z.string(), z.unknown()) }),
});

let text: string;
let document: z.output<typeof documentSchema>;
beforeAll(async () => {
  const response = await GET(request("GET", "/api/openapi.json"), at());
  expect(response.status).toBe(200);
  text = await response.text();
  document = documentSchema.parse(JSON.parse(text));
});

const operations = () => Object.entries(document.paths).flatMap(([address, methods]) => Object.entries(methods).map(([method, found]) => ({ address, method, ...operation.parse(found) })));

test("every method that a route file exports is in the document", () => {
  const api = path.resolve(import.meta.dirname, "../../../app/api");
  const files = fs.readdirSync(api, { recursive: true, encoding: "utf8" }).filter((file) => file.endsWith("route.ts") && !file.includes("[..."));
  const exported = files.flatMap((file) =>
    [...fs.readFileSync(path.join(api, file), "utf8").matchAll(/export const (GET|POST|PUT|PATCH|DELETE)\b/g)].map(([, method]) => `${method?.toLowerCase()} ${pathOf(file)}`),
  );
  expect(operations().map(({ method, address }) => `${method} ${address}`).toSorted()).toEqual(exported.toSorted());
});

test("operation ids are unique", () => {
  const ids = operations().map(({ operationId }) => operationId);
  expect(ids.filter((id, i) => ids.indexOf(id) !== i)).toEqual([]);
});

test("every part of an address is a parameter, and no other", () => {
  for (const { address, parameters = [] } of operations()) {
    const parts = [...address.matchAll(/\{(\w+)\}/g)].map(([, name]) => name);
    expect(parameters.filter((one) => one.in === "path").map(({ name }) => name).toSorted(), address).toEqual(parts.toSorted());
    expect(parameters.filter((one) => one.in === "path").every(({ required }) => required)).toBe(true);
  }
});

test("every reference leads somewhere", () => {
  const targets = new Set(Object.keys(document.components.schemas).map((name) => `#/components/schemas/${name}`));
  const dangling = [...text.matchAll(/"\$ref":"([^"]+)"/g)].map(([, target]) => target ?? "").filter((target) => !targets.has(target));
  expect(dangling).toEqual([]);
});

describe("what a call's schemas say is in its entry", () => {
  test("making a person", () => {
    const made = operation.parse(document.paths["/api/people"]?.post);
    expect(made.requestBody?.content["application/json"]?.schema).toMatchObject({
      additionalProperties: false,
      required: ["email", "name", "role", "password"],
      properties: { role: { enum: ["administrator", "researcher", "operator", "viewer"] }, password: { minLength: 12, maxLength: 200 } },
    });
    expect(Object.keys(made.responses)).toEqual(["201", "default"]);
    expect(made.parameters?.map(({ name }) => name)).toEqual(["Idempotency-Key"]);
    expect(made.security).toEqual([{ session: [] }, { token: [] }]);
  });

  test("listing people", () => {
    const listed = operation.parse(document.paths["/api/people"]?.get);
    expect(listed.parameters).toContainEqual({ name: "limit", in: "query", required: false, schema: expect.objectContaining({ type: "integer", minimum: 1, maximum: 200, default: 50 }) });
  });

  test("a call without an answer is 204", () => {
    expect(Object.keys(operation.parse(document.paths["/api/password-resets/use"]?.post).responses)).toEqual(["204", "default"]);
  });
});
