import net, { type AddressInfo } from "node:net";
import { Ajv2020 } from "ajv/dist/2020";
import addFormats from "ajv-formats";
import { afterAll, beforeAll, expect, test, vi } from "vitest";
import { openApi } from "@/app/api/openapi";
import { sequelize } from "@/lib/db";
import { EXAMPLES } from "@/lib/http/examples";
import { ANSWER_EXAMPLES } from "@/lib/http/examples/answer-examples";
import type { OpenApiDocument } from "@/lib/http/openapi-types";
import { listener } from "@/lib/listener";
import { API_CALLS, type ApiCall } from "../../factories/api-calls";
import { prepareCall, sendPrepared } from "../../factories/prepared-call";
import { isBinary, recordAnswer, writeRecorded } from "../../factories/recorded-answers";
import { PREPARATIONS } from "../../factories/preparations";

/** Set to 1, the answers become the examples of the reference. */
const RECORD = process.env.LONGREED_RECORD === "1";

const mailServer = net.createServer((socket) => socket.end());

beforeAll(async () => {
  // The examples speak of this day, and some of them of what lies ahead on it.
  vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-05-14T12:00:00Z") });
  // Longreed is well when there are a queue and a mail server.
  await sequelize.query("create schema pgboss; create table pgboss.job (id int)");
  await new Promise<void>((resolve) => mailServer.listen(0, "127.0.0.1", resolve));
  process.env.SMTP_URL = `smtp://127.0.0.1:${(mailServer.address() as AddressInfo).port}`;
});
afterAll(async () => {
  if (RECORD) writeRecorded();
  vi.useRealTimers();
  mailServer.close();
  await listener().close();
  await sequelize.close();
});

/** The document as anybody else would use it: with a validator that knows nothing of our schemas. */
const ajv = addFormats(new Ajv2020({ strict: false, allErrors: true }));
let document: OpenApiDocument;
beforeAll(async () => {
  document = JSON.parse(JSON.stringify(await openApi())) as OpenApiDocument;
  ajv.addSchema(document, "document");
});

const pointer = (...parts: string[]) => `document#/${parts.map((part) => encodeURIComponent(part.replaceAll("~", "~0").replaceAll("/", "~1"))).join("/")}`;

/** What the document has against a value, as sentences. */
function faults(value: unknown, ...place: string[]): string[] {
  const check = ajv.compile({ $ref: pointer(...place, "schema") });
  check(value);
  return (check.errors ?? []).map(({ instancePath, message }) => `${instancePath} ${message}`);
}

const inFormats = API_CALLS.filter(({ operation }) => operation.produces?.includes("text/csv")).flatMap((call) =>
  (["csv", "json"] as const).map((format) => ({ name: call.name, summary: `as ${format.toUpperCase()}`, call, example: undefined, query: `?format=${format}` })),
);

const sent = API_CALLS.flatMap((call): { name: string; summary: string; call: ApiCall; example: unknown; query?: string }[] => {
  const examples = Object.entries(EXAMPLES[call.name] ?? {});
  return examples.length > 0 ? examples.map(([summary, example]) => ({ name: call.name, summary, call, example })) : [{ name: call.name, summary: "without a body", call, example: undefined }];
});

test("every call of the document is sent", () => {
  expect(Object.keys(PREPARATIONS).toSorted()).toEqual(API_CALLS.map(({ name }) => name).toSorted());
});

test("no answer was recorded of a call that is not there", () => {
  expect(Object.keys(ANSWER_EXAMPLES).filter((name) => !API_CALLS.some((call) => call.name === name))).toEqual([]);
});

test.each(API_CALLS.map(({ name, path, method }) => ({ name, path, method: method.toLowerCase() })))("$name: the example of its answer is what the document says of it", ({ path, method }) => {
  const answers = Object.entries(document.paths[path][method].responses).filter(([status]) => status !== "default");
  for (const [status, { content = {} }] of answers)
    for (const [type, { example }] of Object.entries(content)) {
      if (isBinary(type)) continue;
      expect(example, type).toBeDefined();
      expect(faults(example, "paths", path, method, "responses", status, "content", type)).toEqual([]);
    }
});

test.each([...sent, ...inFormats])("$name, $summary: the document allows the example, and its answer", async ({ call, example, query }) => {
  const { path, method } = call;
  const place = ["paths", path, method.toLowerCase()];
  const prepared = await prepareCall({ call, example });
  if (prepared.body !== undefined) expect(faults(JSON.parse(JSON.stringify(prepared.body)), ...place, "requestBody", "content", "application/json")).toEqual([]);

  const response = await sendPrepared(prepared, { query });
  const text = await response.text();
  const { responses } = document.paths[path][method.toLowerCase()];
  const documented = responses[String(response.status)];
  expect(documented, `${response.status} ${text.slice(0, 600)}`).toBeDefined();
  if (!documented.content) return expect(text).toBe("");

  const type = String(response.headers.get("content-type")).split(";")[0];
  expect(Object.keys(documented.content)).toContain(type);
  if (RECORD) recordAnswer(call.name, type, text);
  if (type === "application/json") expect(faults(JSON.parse(text), ...place, "responses", String(response.status), "content", type)).toEqual([]);
});
