import { gzipSync } from "node:zlib";
import { afterAll, beforeAll, describe, expect, test, vi } from "vitest";
import { z } from "zod";
import { sequelize } from "@/lib/db";
import { EXAMPLES } from "@/lib/http/examples";
import { listener } from "@/lib/listener";
import { API_CALLS, type ApiCall } from "../../factories/api-calls";
import { databaseDigest, oneIdOfEach, partIds } from "../../factories/database-digest";
import { hours, now } from "../../factories/now";
import { buildPerson } from "../../factories/person";
import { buildCampaign } from "../../factories/campaign";
import { buildRig } from "../../factories/rig";
import { prepareCall, PREPARED_CALLS, sendPrepared, type Otherwise, type PreparedCall } from "../../factories/prepared-call";
import { HOSTILE_TEXTS, placesIn, withText } from "../../factories/wrong-json";
import { agentToken, at, cookieOf, ORIGIN, request, signedInAs, tokenOf } from "../../factories/session";

const TOO_LARGE = "x".repeat(9 * 1024 * 1024);
const TOO_LARGE_INSIDE = gzipSync(TOO_LARGE);
const TOO_DEEP = ["[".repeat(100_000), `{"a":${"[".repeat(50_000)}${"]".repeat(50_000)}}`];

const forPeople = PREPARED_CALLS.filter(({ operation }) => operation.access !== "agent");
const named = (calls: readonly ApiCall[]) => calls.map((call) => [call.name, call] as const);
const withBody = forPeople.filter(({ operation }) => operation.body);
const signedIn = forPeople.filter(({ operation }) => operation.access !== "public");
const withId = signedIn.filter(({ path }) => path.includes("{"));
/** A new password ends the very session that could repeat the call. */
const idempotent = signedIn.filter(({ method, path }) => method === "POST" && path !== "/api/me/password");

const TABLE_OF_FIELD: Readonly<Record<string, string>> = { rigId: "rig", sensorId: "sensor", lotId: "lot", protocolVersionId: "protocol_version", before: "campaign", phaseId: "phase" };
const ID_IN_BODY = /"(rigId|sensorId|lotId|protocolVersionId|before|phaseId)":"/;

const queryFields = (query: z.ZodType): object => (query instanceof z.ZodObject ? (query.shape as object) : {});

const prepared = new Map<string, PreparedCall>();

beforeAll(async () => {
  vi.useFakeTimers({ toFake: ["Date"], now: new Date("2026-05-14T12:00:00Z") });
  await partIds();
  for (const call of forPeople) prepared.set(call.name, await prepareCall({ call }));
}, 120_000);
afterAll(async () => {
  vi.useRealTimers();
  await listener().close();
  await sequelize.close();
});

async function refuses({ name }: ApiCall, otherwise: Otherwise, statuses: number[], about: string): Promise<Record<string, unknown>> {
  const answer = await sendPrepared(prepared.get(name) as PreparedCall, otherwise);
  const text = await answer.text();
  expect(statuses, `${about}: ${answer.status} ${text.slice(0, 300)}`).toContain(answer.status);
  expect(answer.headers.get("content-type"), about).toBe("application/problem+json");
  const problem = JSON.parse(text) as Record<string, unknown>;
  expect(problem, about).toMatchObject({ type: expect.stringMatching(/^\/problems\/[a-z-]+$/), title: expect.any(String), status: answer.status, detail: expect.any(String) });
  if (answer.status === 400) expect(problem.errors, about).toEqual(expect.arrayContaining([{ path: expect.any(String), message: expect.any(String) }]));
  expect(text, about).not.toMatch(/\bat .*\.ts:|select |Sequelize/);
  return problem;
}

async function changesNothing(work: () => Promise<void>): Promise<void> {
  const before = await databaseDigest();
  await work();
  expect(await databaseDigest()).toBe(before);
}

describe.each(named(withBody))("bodies of %s", (_, call) => {
  test("what is no JSON object is 400, what is too large 413, what is of another type 415; nothing changes", async () => {
    const good = JSON.stringify(prepared.get(call.name)?.body);
    await changesNothing(async () => {
      for (const body of ["{", "nul", "[]", "null", "7", '"text"', "{}}", '{"a":1', "\u0000", "{'a':1}", "NaN", '{"a":NaN}', ...TOO_DEEP, '{"a\\u0000":1}', '{"\\ud800":1}', '{"nobodyKnowsThis":1}'])
        await refuses(call, { body }, [400], body.slice(0, 12));
      await refuses(call, { body: new Uint8Array([0x7b, 0x22, 0xff, 0xfe, 0x22, 0x7d]) }, [400], "not UTF-8");
      await refuses(call, { body: TOO_LARGE }, [413], "9 MiB");
      const gzip = { "content-encoding": "gzip" };
      await refuses(call, { body: TOO_LARGE_INSIDE, headers: gzip }, [413], "9 MiB inside gzip");
      await refuses(call, { body: "no gzip", headers: gzip }, [400], "bad gzip");
      await refuses(call, { body: gzipSync(good).subarray(0, 12), headers: gzip }, [400], "short gzip");
      for (const type of ["text/plain", "application/x-www-form-urlencoded", "multipart/form-data; boundary=x", "application/json; charset=latin1", "nonsense"])
        await refuses(call, { body: good, headers: { "content-type": type } }, [415], type);
      for (const encoding of ["br", "deflate", "gzip, gzip"]) await refuses(call, { body: good, headers: { "content-encoding": encoding } }, [415], encoding);
    });
  });
});

test("a draft may be nested as deep as one writes, and no deeper than what reads it can go", async () => {
  const call = forPeople.find(({ name }) => name === "POST /api/protocols/drafts") as ApiCall;
  const nested = (depth: number) => `{"draft":{"a":${"[".repeat(depth)}${"]".repeat(depth)}}}`;
  await changesNothing(async () => {
    for (const depth of [101, 1000, 4700, 100_000, 1_000_000]) await refuses(call, { body: nested(depth) }, [400], `${depth}`);
  });
  expect((await sendPrepared(prepared.get(call.name) as PreparedCall, { body: nested(99) })).status).toBe(201);
});

test("what people type who mean harm is stored as it is and comes back so", async () => {
  const rig = await buildRig();
  const { id: campaignId } = await buildCampaign({ state: "running", rigId: rig.id });
  const { cookie } = await signedInAs("administrator");
  const send = async (name: string, id: string, body?: unknown) => {
    const call = API_CALLS.find((one) => one.name === name) as ApiCall;
    return (await call.handler(request(call.method, "/api/x", { cookie, body }), at({ id }))).json() as Promise<Record<string, unknown>>;
  };
  for (const text of HOSTILE_TEXTS) {
    const kept = text.trim();
    if (kept === "") continue;
    expect(await send("PATCH /api/rigs/{id}", rig.id, { name: text })).toMatchObject({ name: kept });
    expect(await send("GET /api/rigs/{id}", rig.id)).toMatchObject({ name: kept });
    await send("POST /api/campaigns/{id}/notes", campaignId, { text });
    expect(await send("GET /api/campaigns/{id}/notes", campaignId)).toMatchObject({ items: expect.arrayContaining([expect.objectContaining({ text: kept })]) });
  }
  expect(await send("GET /api/audit", "")).toMatchObject({ items: expect.any(Array) });
});

describe("credentials", () => {
  let wrong: Record<string, Record<string, string | undefined>>;
  let readOnly: string;
  let administrator: string;

  beforeAll(async () => {
    const person = await buildPerson({ role: "administrator" });
    await person.reload();
    const closed = await buildPerson({ role: "administrator", closedAt: now });
    await closed.reload();
    const bearer = (token: string) => ({ cookie: undefined, authorization: `Bearer ${token}` });
    const cookie = await cookieOf(person);
    wrong = {
      none: { cookie: undefined },
      "an empty cookie": { cookie: cookie.split("=")[0] + "=" },
      "a forged cookie": { cookie: `${cookie.slice(0, -8)}AAAAAAAA` },
      "a session of before a new password": { cookie: await cookieOf({ id: person.id, sessionVersion: person.sessionVersion - 1 }) },
      "a session of nobody": { cookie: await cookieOf({ id: "999999999", sessionVersion: 1 }) },
      "a session whose id is none": { cookie: await cookieOf({ id: "1 or 1=1", sessionVersion: 1 }) },
      "a session whose id holds a NUL": { cookie: await cookieOf({ id: "1\u0000", sessionVersion: 1 }) },
      "a session of a closed account": { cookie: await cookieOf(closed) },
      "an agent's token": bearer((await agentToken()).token),
      "a token that has run out": bearer(await tokenOf(person.id, { expiresAt: hours(-1) })),
      "a withdrawn token": bearer(await tokenOf(person.id, { revokedAt: now })),
      "a token of a closed account": bearer(await tokenOf(closed.id)),
      "an unknown token": bearer(`lr_person_${"A".repeat(43)}`),
      "a very long token": bearer("a".repeat(10_000)),
      "SQL for a token": bearer("' or 1=1 --"),
      "another scheme": { authorization: `Basic ${Buffer.from("a:b").toString("base64")}` },
      "a bad token beside a good cookie": { cookie, authorization: "Bearer x" },
    };
    readOnly = await tokenOf(person.id, { scope: "read" });
    administrator = cookie;
  });

  test.each(named(signedIn))("%s takes no wrong ones: 401; a token that may only read and a foreign page change nothing: 403", async (_, call) => {
    await changesNothing(async () => {
      for (const [about, headers] of Object.entries(wrong)) await refuses(call, { headers }, [401], about);
      if (call.method === "GET") return;
      await refuses(call, { headers: { cookie: undefined, authorization: `Bearer ${readOnly}` } }, [403], "read only");
      for (const origin of [undefined, "null", "https://elsewhere.example", `${ORIGIN}.elsewhere.example`, "http://longreed.example"])
        await refuses(call, { headers: { cookie: administrator, origin } }, [403], `origin ${origin}`);
    });
  });
});

describe.each(named(withId))("the address of %s", (_, call) => {
  test("an id that is none, that nothing has or that another thing has is 404, and nothing changes", async () => {
    const { params } = prepared.get(call.name) as PreparedCall;
    const own = new Set(Object.values(params));
    const ofOthers = [...(await oneIdOfEach()).values()].filter((id) => !own.has(id));
    const table = tableOf(call.path);
    const known = [...(await oneIdOfEach())].find(([name]) => name === table)?.[1];
    const bad = ["0", "-1", "1.5", "NaN", "99999999999999999999", "9223372036854775807", "1e3", "0x1", " 1", "1;drop table step", "%00", "\u0000", "../1", "１", "C-1", "a".repeat(5000), "[object Object]", ""];
    await changesNothing(async () => {
      for (const name of Object.keys(params))
        for (const id of [...bad, ...ofOthers]) {
          if (name === "id" && id === known) continue;
          await refuses(call, { params: { ...params, [name]: id } }, [404], `${name} ${id.slice(0, 20)}`);
        }
    });
  });
});

const ODD_TABLES: Readonly<Record<string, string>> = { "blocked-times": "maintenance_window", imports: "import_run", people: "person", tasks: "operator_task", tokens: "access_token" };

/** The table that the `{id}` of an address is of. */
const tableOf = (path: string): string => ODD_TABLES[path.split("/")[2]] ?? path.split("/")[2].replace(/s$/, "").replaceAll("-", "_");


describe.each(named(signedIn.filter(({ operation }) => operation.query && "cursor" in queryFields(operation.query))))("cursors of %s", (_, call) => {
  test("one that the list did not give out is 400 and named; the true one leads on", async () => {
    const { params } = prepared.get(call.name) as PreparedCall;
    const first = (await (await sendPrepared(prepared.get(call.name) as PreparedCall, { query: "?limit=1" })).json()) as { nextCursor: string | null };
    const forged = ["x", "W10", "bnVsbA", "e30", "%00", "A".repeat(400)];
    if (first.nextCursor) {
      const query = `?limit=1&cursor=${first.nextCursor}`;
      expect((await sendPrepared(prepared.get(call.name) as PreparedCall, { query })).status).toBe(200);
      const parts = JSON.parse(Buffer.from(first.nextCursor, "base64url").toString()) as unknown[];
      for (const [i, part] of parts.entries())
        for (const wrong of [`${part}\u0000`, "\ud800", null, [], {}, 1e10, -1e99, ...(i === parts.length - 1 ? ["", "x", "9223372036854775808", "1 or 1=1"] : [])])
          forged.push(Buffer.from(JSON.stringify(parts.with(i, wrong))).toString("base64url"));
    }
    for (const cursor of forged) expect((await refuses(call, { params, query: `?cursor=${cursor}` }, [400], cursor)).errors, cursor).toEqual([{ path: "cursor", message: expect.any(String) }]);
  });
});

const jsonOf = (text: string): unknown => (text === "" ? "" : JSON.parse(text));

describe.each(named(withBody.filter(({ name }) => ID_IN_BODY.test(JSON.stringify(EXAMPLES[name])))))("ids in the body of %s", (_, call) => {
  test("what nothing has or another thing has is refused at its field, and nothing changes", async () => {
    const { body } = prepared.get(call.name) as PreparedCall;
    const ids = [...placesIn(body)].filter(({ path, value }) => typeof value === "string" && TABLE_OF_FIELD[String(path.at(-1))]);
    const things = await oneIdOfEach();
    await changesNothing(async () => {
      for (const { path } of ids)
        for (const [table, id] of [...things, ["nothing", "999999999"] as const]) {
          if (table === TABLE_OF_FIELD[String(path.at(-1))]) continue;
          const problem = await refuses(call, { body: withText(body, path, JSON.stringify(id)) }, [404, 422], `${path.join(".")} is the id of ${table}`);
          if (problem.status === 422) expect(problem.errors, `${path.join(".")} of ${table}`).toEqual(expect.arrayContaining([expect.objectContaining({ path: path.join(".") })]));
        }
    });
  });
});

describe.each(named(idempotent))("Idempotency-Key of %s", (_, call) => {
  test("once for a key; the same key with another body or at another address is 422, a key that is none 400", async () => {
    const fresh = await prepareCall({ call });
    const headers = { "idempotency-key": `key of ${call.name}` };
    const first = await sendPrepared(fresh, { headers });
    const answer = await first.text();
    expect(first.status, answer).toBeLessThan(300);
    prepared.set(call.name, fresh);

    await changesNothing(async () => {
      const again = await sendPrepared(fresh, { headers });
      const repeated = await again.text();
      if (again.status !== 409) expect([again.status, jsonOf(repeated)]).toEqual([first.status, jsonOf(answer)]);
      else expect(JSON.parse(repeated)).toMatchObject({ type: "/problems/shown-once" });

      const body = `${JSON.stringify(fresh.body ?? {})} `;
      if (call.operation.body) await refuses(call, { headers, body }, [422], "another body");
      if (call.path.includes("{")) await refuses(call, { headers, params: Object.fromEntries(Object.keys(fresh.params).map((name) => [name, "999999999"])) }, [422], "another address");
      for (const key of ["", '""', "k".repeat(256)]) await refuses(call, { headers: { "idempotency-key": key } }, [400], `key ${key.slice(0, 5)}`);
    });
    prepared.set(call.name, await prepareCall({ call }));
  });
});
