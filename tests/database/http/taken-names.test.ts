import { afterAll, beforeAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { EXAMPLES } from "@/lib/http/examples";
import { API_CALLS } from "../../factories/api-calls";
import { buildLiquid } from "../../factories/liquid";
import { buildRig } from "../../factories/rig";
import { at, request, signedInAs } from "../../factories/session";

afterAll(() => sequelize.close());

let cookie: string;
beforeAll(async () => void ({ cookie } = await signedInAs("administrator")));

async function send(name: string, body: unknown, params: Record<string, string> = {}) {
  const call = API_CALLS.find((one) => one.name === name);
  if (!call) throw new Error(`${name} is no call`);
  const response = await call.handler(request(call.method, "/api/x", { cookie, body }), at(params));
  return { status: response.status, answer: (await response.json()) as unknown };
}

const takenAt = (path: string) => ({ status: 409, answer: { type: "/problems/already-there", errors: [{ path, message: expect.stringContaining("taken") }] } });

test.each([
  ["POST /api/rigs", "name"],
  ["POST /api/sensors", "serial"],
  ["POST /api/liquids", "name"],
  ["POST /api/protocols", "definition.name"],
])("what %s makes twice is refused at the field %s", async (call, field) => {
  const [example] = Object.values(EXAMPLES[call]);
  expect((await send(call, example)).status).toBe(201);
  expect(await send(call, example)).toMatchObject(takenAt(field));
});

test("a lot's code is taken within its liquid", async () => {
  const params = { id: (await buildLiquid()).id };
  await send("POST /api/liquids/{id}/lots", { code: "A-1" }, params);
  expect(await send("POST /api/liquids/{id}/lots", { code: "A-1" }, params)).toMatchObject(takenAt("code"));
});

test("a rig is not renamed to the name of another", async () => {
  const [one, other] = [await buildRig(), await buildRig()];
  expect(await send("PATCH /api/rigs/{id}", { name: one.name }, { id: other.id })).toMatchObject(takenAt("name"));
});
