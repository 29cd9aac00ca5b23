import { afterAll, beforeAll, expect, test } from "vitest";
import { z } from "zod";
import { change, rows, sequelize } from "@/lib/db";
import { conflict } from "@/lib/errors";
import { forgetOldKeys } from "@/lib/http/idempotency";
import { route } from "@/lib/http/route";
import { at, request, signedInAs } from "../../factories/session";

afterAll(() => sequelize.close());

let made = 0;
let failNext = false;
const POST = route({
  permission: "read",
  summary: "Makes one",
  body: z.object({ name: z.string() }),
  status: 201,
  handle({ body }) {
    if (failNext) {
      failNext = false;
      throw conflict("Not now");
    }
    return { id: String(++made), name: body.name };
  },
});

let cookie: string;
let personId: string;
beforeAll(async () => {
  const signedIn = await signedInAs("viewer");
  cookie = signedIn.cookie;
  personId = signedIn.person.id;
});

const send = (key: string, name = "a", path = "/api/things", own = cookie) =>
  POST(request("POST", path, { cookie: own, body: { name }, headers: { "idempotency-key": key } }), at());

test("the same key again gets the first answer, and nothing is made twice", async () => {
  const first = await send("k1");
  const again = await send("k1");
  expect([first.status, again.status]).toEqual([201, 201]);
  expect(await again.json()).toEqual(await first.json());
});

test("the quoted form of the header is the same key", async () => {
  const first = await send("k-quoted");
  expect(await (await send('"k-quoted"')).json()).toEqual(await first.json());
});

test("the same key with another body or address is 422", async () => {
  await send("k2");
  expect((await send("k2", "b")).status).toBe(422);
  expect((await send("k2", "a", "/api/others")).status).toBe(422);
});

test("another person's key is another key", async () => {
  const other = await signedInAs("viewer");
  const first = (await (await send("k3")).json()) as { id: string };
  const second = (await (await send("k3", "a", "/api/things", other.cookie)).json()) as { id: string };
  expect(second.id).not.toBe(first.id);
});

test("ten at once with one key make one thing", async () => {
  const before = made;
  const answers = await Promise.all(Array.from({ length: 10 }, () => send("k4")));
  expect(made).toBe(before + 1);
  expect(answers.every(({ status }) => status === 201 || status === 409)).toBe(true);
  expect((await send("k4")).status).toBe(201);
});

test("a refusal is not kept: the repeat is a new try", async () => {
  failNext = true;
  expect((await send("k5")).status).toBe(409);
  expect((await send("k5")).status).toBe(201);
});

test("a call that was cut off is neither repeated nor taken for done", async () => {
  await send("k6");
  await change("update idempotency_key set status = null, answer = null, created_at = now() - interval '1 hour' where key = 'k6' and person_id = $1", [personId]);
  const response = await send("k6");
  expect([response.status, await response.json()]).toEqual([409, expect.objectContaining({ type: "/problems/never-ended" })]);
});

test("keys hold 30 days, on each side of the cut-off", async () => {
  const first = (await (await send("k-29")).json()) as { id: string };
  await send("k-31");
  await change("update idempotency_key set created_at = now() - interval '29 days' where key = 'k-29'");
  await change("update idempotency_key set created_at = now() - interval '31 days' where key = 'k-31'");
  expect(await (await send("k-29")).json()).toEqual(first);
  expect(((await (await send("k-31", "b")).json()) as { name: string }).name).toBe("b");
  await change("update idempotency_key set created_at = now() - interval '31 days' where key = 'k-31'");
  expect(await forgetOldKeys({ now: new Date() })).toBe(1);
  expect(await rows("select 1 from idempotency_key where key in ('k-29', 'k-31')")).toHaveLength(1);
});

test("a secret is shown once and never kept with its key", async () => {
  const secret = route({ permission: "read", summary: "Secret", status: 201, shownOnce: true, handle: () => ({ token: "lr_person_secret" }) });
  const ask = () => secret(request("POST", "/api/secrets", { cookie, headers: { "idempotency-key": "k7" } }), at());
  expect((await ask()).status).toBe(201);
  const again = await ask();
  expect([again.status, await again.json()]).toEqual([409, expect.objectContaining({ type: "/problems/shown-once" })]);
  expect(JSON.stringify(await rows("select answer from idempotency_key"))).not.toContain("lr_person_secret");
});

test.each([[""], ["x".repeat(256)]])("a key of a wrong length is 400", async (key) => {
  expect((await send(`"${key}"`)).status).toBe(400);
});
