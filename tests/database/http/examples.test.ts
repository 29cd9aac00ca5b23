import { afterAll, describe, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { EXAMPLES } from "@/lib/http/examples";
import { operationsOf, pathOf } from "@/lib/http/openapi";
import { PROBLEM_CODES, problemType } from "@/lib/problem-types";
import { parseReadings } from "@/lib/readings/parse-readings";

afterAll(() => sequelize.close());

const modules = import.meta.glob<Record<string, unknown>>("/app/api/**/route.ts", { eager: true });

const operations = new Map<string, NonNullable<ReturnType<typeof operationsOf>["GET"]>>(
  Object.entries(modules)
    .filter(([file]) => !file.includes("[..."))
    .flatMap(([file, module]) => Object.entries(operationsOf(module)).map(([method, operation]) => [`${method} ${pathOf(file.replace("/app/api/", ""))}`, operation] as const)),
);
const withBody = [...operations].filter(([, { body, form }]) => body ?? form);
const examples = Object.entries(EXAMPLES).flatMap(([call, named]) => Object.entries(named).map(([summary, value]) => ({ call, summary, value })));

test("every call with a body shows an example of it, and no example is of a call that is not there", () => {
  expect(Object.keys(EXAMPLES).toSorted()).toEqual(withBody.map(([call]) => call).toSorted());
});

test.each(examples)("$call: $summary is what the call takes", ({ call, value }) => {
  const operation = operations.get(call);
  const checked = (operation?.body ?? operation?.form)?.safeParse(JSON.parse(JSON.stringify(value)));
  expect(checked?.error?.issues ?? []).toEqual([]);
  expect(checked?.success).toBe(true);
});

test.each(examples.filter(({ call }) => call.endsWith("/readings")))("the check by hand of uploads takes it as well: $summary", ({ value }) => {
  expect(parseReadings(JSON.parse(JSON.stringify(value))).readings).toHaveLength(1);
});

describe("problem types", () => {
  test("each is of calls that are there", () => {
    const named = PROBLEM_CODES.flatMap((code) => problemType(code).calls ?? []);
    expect(named.filter((call) => !operations.has(call))).toEqual([]);
  });

  test("each has a status of the contract, a sentence and a remedy", () => {
    for (const code of PROBLEM_CODES) {
      const { status, means, remedy } = problemType(code);
      expect([400, 401, 403, 404, 409, 410, 413, 415, 422, 429, 500, 503], code).toContain(status);
      expect(means, code).toMatch(/\.$/);
      expect(remedy, code).toMatch(/\.$/);
    }
  });
});
