import { afterAll, beforeAll, expect, test } from "vitest";
import { openApi } from "@/app/api/openapi";
import { sequelize } from "@/lib/db";
import type { OpenApiDocument } from "@/lib/http/openapi-types";
import { referenceOf, schemasOf, type ReferenceGroup } from "@/lib/http/reference";

afterAll(() => sequelize.close());

let document: OpenApiDocument;
let groups: ReferenceGroup[];
beforeAll(async () => {
  document = await openApi();
  groups = referenceOf(document);
});

const calls = () => groups.flatMap((group) => group.calls);

test("every call of the document stands under one head, agents first, under an address of plain letters", () => {
  const written = Object.entries(document.paths).flatMap(([path, methods]) => Object.keys(methods).map((method) => `${method.toUpperCase()} ${path}`));
  expect(calls().map(({ method, path }) => `${method} ${path}`).toSorted()).toEqual(written.toSorted());
  expect(groups[0]?.title).toBe("Rig agents");
  expect(groups.map(({ id }) => id).filter((id) => !/^[a-z-]+$/.test(id))).toEqual([]);
});

test("every name of a schema in a table leads to its fields on the same page", () => {
  for (const group of groups) {
    const schemas = schemasOf(document, group.calls);
    const names = schemas.map(({ name }) => name);
    const fields = [...group.calls.flatMap(({ body, answers }) => [...(body?.fields ?? []), ...answers.flatMap((answer) => answer.fields)]), ...schemas.flatMap((schema) => schema.fields)];
    expect(fields.flatMap(({ ref }) => ref ?? []).filter((ref) => !names.includes(ref)), group.title).toEqual([]);
  }
});

test("holding a campaign reads as one would tell it", () => {
  expect(calls().find(({ id }) => id === "postCampaignsIdHold")).toMatchObject({
    who: "an operator or a researcher or an administrator",
    parameters: [{ name: "id", where: "path", required: true }, { name: "Idempotency-Key", where: "header", required: false }],
    body: { type: "application/json", fields: [{ name: "why", type: "text", range: "1 to 2000 characters", required: false }] },
    answers: [{ status: "200" }],
    problems: expect.arrayContaining(["invalid", "not-signed-in", "not-allowed", "not-found", "conflict", "too-large", "unavailable"]),
  });
});

test("each call can be tried by hand, with its token and its body", () => {
  for (const { method, path, curl, who, body } of calls()) {
    expect(curl, path).toMatch(new RegExp(`^curl ${method === "GET" ? "" : `-X ${method} `}http\\S+`));
    expect(curl.includes("$TOKEN"), path).toBe(who !== "anybody");
    expect(/ -(d|F) '/.test(curl), path).toBe(body !== undefined && body.examples.length > 0);
    expect(curl, path).not.toContain("{id}");
  }
});
