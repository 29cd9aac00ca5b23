import { gzipSync } from "node:zlib";
import { DatabaseError, UniqueConstraintError } from "sequelize";
import { afterAll, beforeAll, describe, expect, test } from "vitest";
import { z } from "zod";
import { change, sequelize } from "@/lib/db";
import { conflict, tooMany } from "@/lib/errors";
import { idParams } from "@/lib/http/ids";
import { Answer } from "@/lib/http/respond";
import { route } from "@/lib/http/route";
import { at, cookieOf, ORIGIN, request, signedInAs, tokenOf } from "../../factories/session";
import { buildPerson } from "../../factories/person";

afterAll(() => sequelize.close());

const POST = route({
  permission: "edit campaigns",
  summary: "For the tests",
  body: z.strictObject({ name: z.string().min(2), n: z.number().int().optional() }),
  handle: ({ person, body }) => ({ by: person.name, ...body }),
});

const throwing = (error: unknown) =>
  route({
    permission: "public",
    summary: "Fails",
    handle() {
      throw error;
    },
  })(request("GET", "/api/x"), at());

let cookie: string;
beforeAll(async () => {
  ({ cookie } = await signedInAs("researcher"));
});

const post = (headers: Record<string, string>, body: BodyInit) => POST(new Request(`${ORIGIN}/api/x`, { method: "POST", headers: { cookie, origin: ORIGIN, ...headers }, body }), at());
const json = { "content-type": "application/json" };

describe("who may call", () => {
  test("without a session or token the answer is 401 as problem+json", async () => {
    const response = await POST(request("POST", "/api/x", { body: { name: "ab" } }), at());
    expect(response.status).toBe(401);
    expect(response.headers.get("content-type")).toBe("application/problem+json");
    expect(response.headers.get("www-authenticate")).toBe("Bearer");
    expect(await response.json()).toMatchObject({ type: "/problems/not-signed-in", status: 401, title: expect.any(String), detail: expect.any(String) });
  });

  test.each([
    ["viewer", 403],
    ["operator", 403],
    ["researcher", 200],
    ["administrator", 200],
  ] as const)("a %s gets %i where campaigns are edited", async (role, status) => {
    const { cookie: own } = await signedInAs(role);
    expect((await POST(request("POST", "/api/x", { cookie: own, body: { name: "ab" } }), at())).status).toBe(status);
  });

  test("a role change holds at once for a session that is open", async () => {
    const { person, cookie: own } = await signedInAs("researcher");
    await person.update({ role: "viewer" });
    expect((await POST(request("POST", "/api/x", { cookie: own, body: { name: "ab" } }), at())).status).toBe(403);
  });

  test("a session of an older version, of a closed account, or with a forged cookie is none", async () => {
    const { person, cookie: own } = await signedInAs("researcher");
    const ask = (given: string) => POST(request("POST", "/api/x", { cookie: given, body: { name: "ab" } }), at());
    await person.update({ sessionVersion: 2 });
    expect((await ask(own)).status).toBe(401);
    const renewed = await cookieOf(person);
    expect((await ask(renewed)).status).toBe(200);
    expect((await ask(`${renewed.slice(0, -4)}AAAA`)).status).toBe(401);
    await person.update({ closedAt: new Date() });
    expect((await ask(renewed)).status).toBe(401);
  });

  test.each([[undefined], ["https://elsewhere.example"], ["null"], ["https://longreed.example.elsewhere.example"], ["http://longreed.example"]])(
    "a change with a cookie from origin %s is refused",
    async (origin) => {
      const headers: Record<string, string> = { cookie, ...json };
      if (origin) headers.origin = origin;
      const response = await POST(new Request(`${ORIGIN}/api/x`, { method: "POST", headers, body: '{"name":"ab"}' }), at());
      expect(response.status).toBe(403);
    },
  );
});

describe("personal access tokens", () => {
  const reading = route({ permission: "read", summary: "Reads", handle: ({ person }) => ({ role: person.role }) });

  test("need no Origin, and a reading one changes nothing", async () => {
    const { id } = await buildPerson();
    const write = await tokenOf(id);
    const read = await tokenOf(id, { scope: "read" });
    expect((await POST(request("POST", "/api/x", { token: write, body: { name: "ab" } }), at())).status).toBe(200);
    expect((await POST(request("POST", "/api/x", { token: read, body: { name: "ab" } }), at())).status).toBe(403);
    expect((await reading(request("GET", "/api/x", { token: read }), at())).status).toBe(200);
  });

  test("end when they run out, are withdrawn, or their person's account is closed", async () => {
    const person = await buildPerson();
    const status = async (token: string) => (await reading(request("GET", "/api/x", { token }), at())).status;
    expect(await status(await tokenOf(person.id, { expiresAt: new Date(Date.now() + 60_000) }))).toBe(200);
    expect(await status(await tokenOf(person.id, { expiresAt: new Date(Date.now() - 1) }))).toBe(401);
    expect(await status(await tokenOf(person.id, { revokedAt: new Date() }))).toBe(401);
    expect(await status("lr_person_unknown")).toBe(401);
    const token = await tokenOf(person.id);
    await person.update({ closedAt: new Date() });
    expect(await status(token)).toBe(401);
  });

  test("another scheme than Bearer is 401, even with a good cookie beside it", async () => {
    expect((await post({ ...json, authorization: "Basic YTpi" }, '{"name":"ab"}')).status).toBe(401);
  });
});

describe("the body", () => {
  const errorsOf = async (response: Response) => ((await response.json()) as { errors: { path: string; message: string }[] }).errors;

  test("every bad field is named, an unknown one too", async () => {
    const response = await post(json, '{"name":"a","n":1.5,"nam":"x"}');
    expect(response.status).toBe(400);
    expect((await errorsOf(response)).map(({ path }) => path).toSorted()).toEqual(["n", "nam", "name"]);
  });

  test.each([
    ["not JSON", json, "{", 400],
    ["not UTF-8", json, new Uint8Array([0x22, 0xff, 0x22]), 400],
    ["a NUL character", json, '{"name":"a\\u0000b"}', 400],
    ["half a character", json, '{"name":"a\\ud800b"}', 400],
    ["no content type", { "content-type": "" }, '{"name":"ab"}', 415],
    ["a form", { "content-type": "application/x-www-form-urlencoded" }, "name=ab", 415],
    ["another character set", { "content-type": "application/json; charset=latin1" }, '{"name":"ab"}', 415],
    ["another encoding", { ...json, "content-encoding": "br" }, '{"name":"ab"}', 415],
    ["broken gzip", { ...json, "content-encoding": "gzip" }, '{"name":"ab"}', 400],
    ["gzip", { ...json, "content-encoding": "gzip" }, gzipSync('{"name":"ab"}'), 200],
    ["nothing, where a field is needed", {}, "", 400],
  ] as const)("%s", async (_, headers, body, status) => {
    expect((await post(headers, body as BodyInit)).status).toBe(status);
  });

  test("over 8 MiB is 413 that names the limit, plain or unpacked", async () => {
    const big = JSON.stringify({ name: "x".repeat(8 * 1024 * 1024) });
    const plain = await post(json, big);
    expect(plain.status).toBe(413);
    expect(await plain.json()).toMatchObject({ type: "/problems/too-large", detail: expect.stringContaining("8 MiB") });
    expect((await post({ ...json, "content-encoding": "gzip" }, gzipSync(big))).status).toBe(413);
  });

  test("the depths of a recursive schema end in 400, not in a full stack", async () => {
    type Nest = { in?: Nest };
    const nest: z.ZodType<Nest> = z.lazy(() => z.strictObject({ in: nest.optional() }));
    const deep = route({ permission: "public", summary: "Deep", body: nest, handle: () => ({}) });
    const body = `${'{"in":'.repeat(200_000)}{}${"}".repeat(200_000)}`;
    expect((await deep(new Request(`${ORIGIN}/api/x`, { method: "POST", headers: json, body }), at())).status).toBe(400);
  });
});

describe("address and query", () => {
  const GET = route({
    permission: "public",
    summary: "One",
    params: idParams,
    query: z.object({ n: z.coerce.number().int().max(5).default(1), text: z.string().optional() }),
    handle: ({ params, query }) => ({ ...params, ...query }),
  });

  test.each(["0", "-1", "abc", "1.5", "9223372036854775808", "1%00", "01", " 1"])("the id %s names nothing: 404", async (id) => {
    expect((await GET(request("GET", "/api/x"), at({ id }))).status).toBe(404);
  });

  test("a good one passes with the query's defaults, a bad query is 400", async () => {
    expect(await (await GET(request("GET", "/api/x"), at({ id: "9223372036854775807" }))).json()).toEqual({ id: "9223372036854775807", n: 1 });
    expect((await GET(request("GET", "/api/x?n=6"), at({ id: "1" }))).status).toBe(400);
    expect((await GET(request("GET", "/api/x?text=%00"), at({ id: "1" }))).status).toBe(400);
    expect((await GET(request("GET", "/api/x?n=1&n=2"), at({ id: "1" }))).status).toBe(400);
  });
});

describe("answers", () => {
  const answering = async (result: unknown) => route({ permission: "public", summary: "Answers", handle: () => result })(request("GET", "/api/x"), at());

  test("plain data is JSON, nothing is 204, an Answer has its status, a Response passes", async () => {
    const plain = await answering({ a: 1 });
    expect([plain.status, await plain.json(), plain.headers.get("cache-control")]).toEqual([200, { a: 1 }, "no-store"]);
    expect(plain.headers.get("x-request-id")).toMatch(/^[\w-]{8,64}$/);
    expect((await answering(undefined)).status).toBe(204);
    expect((await answering(new Answer(202, { later: true }))).status).toBe(202);
    const stream = await answering(new Response("a,b\n", { headers: { "content-type": "text/csv" } }));
    expect([await stream.text(), stream.headers.get("content-type")]).toEqual(["a,b\n", "text/csv"]);
  });

  test("an answer that is not what its schema says is a fault of ours", async () => {
    const GET = route({ permission: "public", summary: "Wrong", answer: z.object({ n: z.number() }), handle: () => JSON.parse('{"n":"1"}') as { n: number } });
    expect((await GET(request("GET", "/api/x"), at())).status).toBe(500);
  });
});

describe("errors", () => {
  test("ours keep status, code and members", async () => {
    const response = await throwing(conflict("Someone was faster", "already-there", { by: "M." }));
    expect([response.status, await response.json()]).toEqual([409, expect.objectContaining({ type: "/problems/already-there", detail: "Someone was faster", by: "M." })]);
    expect((await throwing(tooMany("Slow down", 7))).headers.get("retry-after")).toBe("7");
  });

  test("what nobody foresaw is 500 with the request id and no detail", async () => {
    const response = await throwing(new Error("password=hunter2 at /srv/app"));
    const body = await response.text();
    expect(response.status).toBe(500);
    expect(body).not.toMatch(/hunter2|srv|at /);
    expect(body).toContain(response.headers.get("x-request-id"));
  });

  test("what the database refuses is a conflict, a value it cannot hold is 422", async () => {
    const status = (sql: string) => route({ permission: "public", summary: "Writes", handle: () => change(sql).then(() => undefined) })(request("GET", "/api/x"), at()).then((response) => response.status);
    const person = (email: string) => `insert into person (email, name, role, created_at) values ('${email}', 'N', 'viewer', now())`;
    expect(await status(person("twice@longreed.example"))).toBe(204);
    expect(await status(person("twice@longreed.example"))).toBe(409);
    expect(await status("insert into access_token (person_id, name, token_hash, last4, scope, created_at) values (999999, 'n', 'h', 'last', 'read', now())")).toBe(409);
    expect(await status(person("no address"))).toBe(422);
    expect(await status("select 'x'::bigint")).toBe(422);
    expect(await status("delete from audit_event")).toBe(204);
    expect(await status("select nonsense")).toBe(500);
  });

  test.each([
    ["a refused connection", Object.assign(new Error("connect ECONNREFUSED"), { name: "SequelizeConnectionRefusedError" })],
    ["a connection lost in the middle", new DatabaseError(Object.assign(new Error("Connection terminated unexpectedly"), { sql: "" }))],
    ["a server that is stopping", new DatabaseError(Object.assign(new Error("terminating connection"), { sql: "", code: "57P01" }))],
    ["a pool without a free connection", Object.assign(new Error("Operation timeout"), { name: "SequelizeConnectionAcquireTimeoutError" })],
  ])("%s is 503 with Retry-After", async (_, error) => {
    const response = await throwing(error);
    expect([response.status, response.headers.get("retry-after")]).toEqual([503, "5"]);
  });

  test("a unique violation without its cause is still a conflict", async () => {
    const parent = Object.assign(new Error("duplicate key"), { sql: "", code: "23505", constraint: "rig_name_key" });
    expect((await throwing(new UniqueConstraintError({ parent }))).status).toBe(409);
  });
});
