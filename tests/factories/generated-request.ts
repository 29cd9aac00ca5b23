import fc from "fast-check";
import { z } from "zod";
import type { ApiCall } from "./api-calls";
import type { PreparedCall } from "./prepared-call";
import { placesIn, without, withText, WRONG_JSON } from "./wrong-json";

/** One call with one thing of it other than documented. */
export type GeneratedRequest = { call: string; about: string; body?: string; query?: string; place?: string };

/** Any text of JSON: what is on the list of what hurts, and whatever chance makes. */
const anyJson = fc.oneof(
  { weight: 5, arbitrary: fc.constantFrom(...WRONG_JSON) },
  { weight: 1, arbitrary: fc.jsonValue({ maxDepth: 3 }).map((value) => JSON.stringify(value)) },
  { weight: 1, arbitrary: fc.double().map(String).map((text) => (/^-?\d/.test(text) ? text : `"${text}"`)) },
  { weight: 1, arbitrary: fc.string({ unit: "binary", maxLength: 60 }).map((text) => JSON.stringify(text)) },
);

const cursor = fc.oneof(fc.jsonValue({ maxDepth: 1 }), fc.array(fc.constantFrom<unknown>("1", "x", "0", "2026-05-14T08:00:00.000Z", "-infinity", "a\u0000", "9223372036854775808", 1, 1e10, -1, null, [], {}), { maxLength: 3 })).map((value) => Buffer.from(JSON.stringify(value)).toString("base64url"));

const anyValue = fc.oneof(
  anyJson.map((text) => (text.length > 2000 ? "z".repeat(2000) : text.replaceAll('"', ""))),
  fc.constantFrom("", "NaN", "Infinity", "1e999", "-1", "0", "1.5", "201", "9007199254740993", "true", "2026-13-01T00:00:00Z", "0000-01-01T00:00:00Z", "3-1", "1-2-3", "9999999-9999999", "%", "\u0000", "*"),
);

/** Requests for one call: its documented example with one place replaced, taken out or added, or its query with one part so. */
export function requestsOf({ call, body, query }: PreparedCall): fc.Arbitrary<GeneratedRequest> {
  const { name, operation } = call;
  const kinds: fc.Arbitrary<GeneratedRequest>[] = [];
  if (operation.body) {
    const places = [...placesIn(body)];
    const holders = [[], ...places.filter(({ value }) => typeof value === "object" && value !== null && !Array.isArray(value)).map(({ path }) => path)];
    const fields = [...fieldsOf(operation.body), "nobodyKnowsThis", "__proto__", "constructor", "toString"];
    const added = fc.record({ holder: fc.constantFrom(...holders), field: fc.constantFrom(...fields), text: anyJson });
    kinds.push(added.map(({ holder, field, text }) => ({ call: name, about: `${[...holder, field].join(".")} = ${text.slice(0, 40)}`, body: withText(body, [...holder, field], text), place: [...holder, field].join(".") })));
    if (places.length > 0) {
      const replaced = fc.record({ place: fc.constantFrom(...places), text: anyJson });
      kinds.push(replaced.map(({ place: { path }, text }) => ({ call: name, about: `${path.join(".")} = ${text.slice(0, 40)}`, body: withText(body, path, text), place: path.join(".") })));
      kinds.push(fc.constantFrom(...places).map(({ path }) => ({ call: name, about: `no ${path.join(".")}`, body: without(body, path), place: path.join(".") })));
    }
  }
  const names = operation.query ? fieldsOf(operation.query) : [];
  if (names.length > 0) {
    const parts = fc.uniqueArray(fc.constantFrom(...names), { minLength: 1, maxLength: 2 }).chain((chosen) => fc.tuple(...chosen.map((part) => (part === "cursor" ? cursor : anyValue).map((value) => [part, value] as const))));
    const twice = fc.constantFrom(...names).map((part) => [[part, "1"], [part, "2"]] as const);
    kinds.push(fc.oneof({ weight: 9, arbitrary: parts }, { weight: 1, arbitrary: twice }).map((given) => ({ call: name, about: JSON.stringify(given).slice(0, 80), query: queryWith(query, given) })));
  }
  return kinds.length > 0 ? fc.oneof(...kinds) : fc.constant({ call: name, about: "as it is" });
}

function queryWith(query: string, given: readonly (readonly [string, string])[]): string {
  const search = new URLSearchParams(query);
  for (const [name] of given) search.delete(name);
  for (const [name, value] of given) search.append(name, value);
  return `?${search}`;
}

/** Every name of a field that stands anywhere in a schema. */
function fieldsOf(schema: z.ZodType): string[] {
  const found = new Set<string>();
  const walk = (value: unknown): void => {
    if (Array.isArray(value)) return value.forEach(walk);
    if (typeof value !== "object" || value === null) return;
    if ("properties" in value && typeof value.properties === "object" && value.properties) for (const name of Object.keys(value.properties)) found.add(name);
    Object.values(value).forEach(walk);
  };
  walk(z.toJSONSchema(schema, { io: "input", unrepresentable: "any" }));
  return [...found];
}

/** What the call's own schemas have against a request; undefined where they allow it. */
export function refusedBySchema({ operation }: ApiCall, { body, query }: GeneratedRequest): boolean {
  if (query !== undefined) return operation.query?.safeParse(queryObject(query)).success === false;
  return body !== undefined && operation.body?.safeParse(JSON.parse(body)).success === false;
}

function queryObject(query: string): Record<string, string | string[]> {
  const search = new URLSearchParams(query);
  return Object.fromEntries([...new Set(search.keys())].map((name) => [name, search.getAll(name).length === 1 ? (search.get(name) ?? "") : search.getAll(name)]));
}
