import { gzipSync } from "node:zlib";
import { afterAll, expect, test } from "vitest";
import { z } from "zod";
import { sequelize } from "@/lib/db";
import { invalid } from "@/lib/errors";
import { agentRoute } from "@/lib/http/agent-route";
import { AgentToken } from "@/models/agent-token";
import { Rig } from "@/models/rig";
import { agentToken, at, ORIGIN, request } from "../../factories/session";

afterAll(() => sequelize.close());

const POST = agentRoute({
  summary: "For the tests",
  body: z.object({ waitS: z.number().max(25).optional() }),
  handle: ({ agent, session, body }) => ({ rigId: agent.rigId, session, ...body }),
});

test("the token names the rig, the header the session", async () => {
  const { token, rigId } = await agentToken();
  const response = await POST(request("POST", "/api/agent/x", { token, body: { waitS: 5 }, headers: { "agent-session": "s1" } }), at());
  expect([response.status, await response.json()]).toEqual([200, { rigId, session: "s1", waitS: 5 }]);
});

test("a body may be left out where all its fields may", async () => {
  const { token } = await agentToken();
  expect((await POST(request("POST", "/api/agent/x", { token }), at())).status).toBe(200);
});

test("a withdrawn token and a retired rig are 401", async () => {
  const first = await agentToken();
  await AgentToken.update({ revokedAt: new Date() }, { where: { id: first.tokenId } });
  expect((await POST(request("POST", "/api/agent/x", { token: first.token }), at())).status).toBe(401);
  const second = await agentToken();
  await Rig.update({ retiredAt: new Date() }, { where: { id: second.rigId } });
  expect((await POST(request("POST", "/api/agent/x", { token: second.token }), at())).status).toBe(401);
});

test("the last use of a token is noted", async () => {
  const { token, tokenId } = await agentToken();
  await POST(request("POST", "/api/agent/x", { token }), at());
  expect((await AgentToken.findByPk(tokenId))?.lastUsedAt).toBeInstanceOf(Date);
});

test("a parser of one's own takes the place of the schema", async () => {
  const parsing = agentRoute({
    summary: "Parses by hand",
    contract: z.object({ values: z.array(z.number()) }),
    parse(json) {
      const values = (json as { values?: unknown }).values;
      if (!Array.isArray(values)) throw invalid([{ path: "values", message: "is missing" }]);
      return Float64Array.from(values as number[]);
    },
    handle: ({ body }) => ({ n: body.length }),
  });
  const { token } = await agentToken();
  const send = (body: BodyInit, headers: Record<string, string> = {}) =>
    parsing(new Request(`${ORIGIN}/api/agent/x`, { method: "POST", body, headers: { authorization: `Bearer ${token}`, "content-type": "application/json", ...headers } }), at());
  expect(await (await send('{"values":[1,2]}')).json()).toEqual({ n: 2 });
  expect(await (await send(gzipSync('{"values":[1,2,3]}', { level: 1 }), { "content-encoding": "gzip" })).json()).toEqual({ n: 3 });
  const refused = await send("{}");
  expect([refused.status, await refused.json()]).toEqual([400, expect.objectContaining({ errors: [{ path: "values", message: "is missing" }] })]);
  expect((await send('{"values":["\\u0000"]}')).status).toBe(400);
});
