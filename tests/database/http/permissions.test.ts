import { afterAll, beforeAll, expect, test } from "vitest";
import { sequelize } from "@/lib/db";
import { operationsOf, pathOf } from "@/lib/http/openapi";
import type { Handler } from "@/lib/http/operation";
import { may, PERMISSIONS, ROLES, type Permission, type Role } from "@/lib/permissions";
import { agentToken, at, request, signedInAs, tokenOf } from "../../factories/session";
import { buildPerson } from "../../factories/person";

afterAll(() => sequelize.close());

const modules = import.meta.glob<Record<string, unknown>>("/app/api/**/route.ts", { eager: true });

const calls = Object.entries(modules)
  .filter(([file]) => !file.includes("[..."))
  .flatMap(([file, module]) => {
    const path = pathOf(file.replace("/app/api/", ""));
    return Object.entries(operationsOf(module)).map(([method, { access }]) => ({ name: `${method} ${path}`, method, path, access, handler: module[method] as Handler }));
  });

const cookies = {} as Record<Role, string>;
let personal: string;
let agent: string;
beforeAll(async () => {
  for (const role of ROLES) cookies[role] = (await signedInAs(role)).cookie;
  personal = await tokenOf((await buildPerson({ role: "administrator" })).id);
  agent = (await agentToken()).token;
});

const params = (path: string) => at(Object.fromEntries([...path.matchAll(/\{(\w+)\}/g)].map(([, name]) => [name ?? "", "999999999"])));
const addressOf = (path: string) => path.replaceAll(/\{\w+\}/g, "999999999");

const forPeople = calls.filter(({ access }) => access !== "public" && access !== "agent");
const forAgents = calls.filter(({ access }) => access === "agent");

test("there are calls to go through", () => expect(forPeople.length).toBeGreaterThan(10));

test.each(forPeople.map((call) => [call.name, call] as const))("%s names a permission and asks who is calling", async (_, { method, path, access, handler }) => {
  expect(Object.keys(PERMISSIONS)).toContain(access);
  expect((await handler(request(method, addressOf(path)), params(path))).status).toBe(401);
  expect((await handler(request(method, addressOf(path), { token: agent }), params(path))).status).toBe(401);
});

const refused = forPeople.flatMap((call) => ROLES.filter((role) => !may(role, call.access as Permission)).map((role) => ({ role, ...call })));

test.each(refused.map((call) => [call.role, call.name, call] as const))("a %s may not %s", async (role, _, { method, path, handler }) => {
  const body = method === "GET" ? undefined : {};
  expect((await handler(request(method, addressOf(path), { cookie: cookies[role], body }), params(path))).status).toBe(403);
});

test.each(forAgents.map((call) => [call.name, call] as const))("%s is for agents alone", async (_, { method, path, handler }) => {
  expect((await handler(request(method, addressOf(path), { body: {} }), params(path))).status).toBe(401);
  expect((await handler(request(method, addressOf(path), { body: {}, token: personal }), params(path))).status).toBe(401);
  expect((await handler(request(method, addressOf(path), { body: {}, cookie: cookies.administrator }), params(path))).status).toBe(401);
});
