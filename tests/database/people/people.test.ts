import { afterAll, describe, expect, test } from "vitest";
import { PATCH } from "@/app/api/people/[id]/route";
import { GET, POST } from "@/app/api/people/route";
import { rows, sequelize } from "@/lib/db";
import { changeRole, closePerson, openPersonAgain } from "@/lib/people/change-person";
import { createFirstAdministrator } from "@/lib/people/create-administrator";
import { findPeople } from "@/lib/people/find-people";
import { signIn } from "@/lib/people/sign-in";
import { Person } from "@/models/person";
import { now } from "../../factories/now";
import { actor, buildPerson } from "../../factories/person";
import { at, cookieOf, request, signedInAs, tokenOf } from "../../factories/session";

afterAll(() => sequelize.close());

const auditOf = (personId: string) => rows<{ action: string; who: string; detail: unknown }>("select action, who, detail from audit_event where entity = 'person' and entity_id = $1 order by id", [personId]);

describe("the first administrator", () => {
  test("is made once, however many try at once, and can sign in", async () => {
    const make = (n: number) => createFirstAdministrator({ email: `First-${n}@longreed.example`, name: "First", password: "long enough indeed", now });
    const tries = await Promise.allSettled([make(1), make(2), make(3)]);
    expect(tries.filter(({ status }) => status === "fulfilled")).toHaveLength(1);
    const [administrator] = await Person.findAll({ where: { role: "administrator" } });
    expect(administrator?.passwordHash).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
    expect(await signIn({ email: administrator?.email ?? "", password: "long enough indeed", place: "p1", now })).toMatchObject({ role: "administrator" });
    expect(await auditOf(administrator?.id ?? "")).toMatchObject([{ action: "create", who: "Longreed" }, { action: "sign in" }]);
  });

  test.each(["short", "longreed-demo", "x".repeat(201)])("with the password %s is refused outside a demo", async (password) => {
    await expect(createFirstAdministrator({ email: "a@longreed.example", name: "A", password, now })).rejects.toMatchObject({ status: 400 });
  });
});

describe("roles", () => {
  test("a change is written with who, from and to, and holds for the open session", async () => {
    const { cookie, person: administrator } = await signedInAs("administrator");
    const other = await buildPerson({ role: "viewer" });
    const response = await PATCH(request("PATCH", `/api/people/${other.id}`, { cookie, body: { role: "operator" } }), at({ id: other.id }));
    expect([response.status, await response.json()]).toEqual([200, expect.objectContaining({ id: other.id, role: "operator" })]);
    expect(await auditOf(other.id)).toEqual([{ action: "change role", who: administrator.name, detail: { from: "viewer", to: "operator" } }]);
  });

  test("nobody changes the own role, nobody but an administrator any", async () => {
    const by = await actor("administrator");
    await expect(changeRole({ by, now, personId: by.id, role: "viewer" })).rejects.toMatchObject({ status: 409 });
    for (const role of ["researcher", "operator", "viewer"] as const) {
      await expect(changeRole({ by: await actor(role), now, personId: by.id, role: "viewer" })).rejects.toMatchObject({ status: 403 });
    }
  });

  test("two administrators who close each other at once leave one", async () => {
    await Person.update({ closedAt: now }, { where: { role: "administrator" } });
    const [a, b] = [await actor("administrator"), await actor("administrator")];
    const tries = await Promise.allSettled([closePerson({ by: a, now, personId: b.id }), closePerson({ by: b, now, personId: a.id })]);
    expect(tries.filter(({ status }) => status === "fulfilled")).toHaveLength(1);
    expect(tries.find((one) => one.status === "rejected")).toMatchObject({ reason: { code: "last-administrator" } });
    expect(await Person.count({ where: { role: "administrator", closedAt: null } })).toBe(1);
  });
});

describe("closing an account", () => {
  test("ends sessions and tokens for good, keeps the record, and can be taken back", async () => {
    const by = await actor("administrator");
    const { person, cookie } = await signedInAs("administrator");
    const token = await tokenOf(person.id);
    const status = async (given: { cookie?: string; token?: string }) => (await GET(request("GET", "/api/people", given), at())).status;
    expect([await status({ cookie }), await status({ token })]).toEqual([200, 200]);

    await closePerson({ by, now, personId: person.id });
    await closePerson({ by, now, personId: person.id });
    expect([await status({ cookie }), await status({ token })]).toEqual([401, 401]);
    await openPersonAgain({ by, now, personId: person.id });
    expect([await status({ cookie }), await status({ token })]).toEqual([401, 401]);
    await person.reload();
    expect(await status({ cookie: await cookieOf(person) })).toBe(200);
    expect((await auditOf(person.id)).map(({ action }) => action)).toEqual(["close", "open again"]);
  });
});

describe("the list of people", () => {
  test("comes in pages by name, each once, whoever is added meanwhile", async () => {
    const by = await actor("administrator");
    for (const name of ["Zz 1", "Zz 2", "Zz 2", "Zz 3"]) await buildPerson({ name });
    const first = await findPeople({ by, limit: 2, state: "all", search: "zz" });
    await buildPerson({ name: "Zz 0" });
    const second = await findPeople({ by, limit: 2, state: "all", search: "zz", cursor: first.nextCursor ?? undefined });
    expect([...first.items, ...second.items].map(({ name }) => name)).toEqual(["Zz 1", "Zz 2", "Zz 2", "Zz 3"]);
    expect(new Set([...first.items, ...second.items].map(({ id }) => id)).size).toBe(4);
    expect(second.nextCursor).toBeNull();
  });

  test("never shows a password hash, and takes a percent sign as itself", async () => {
    const { cookie } = await signedInAs("administrator");
    const response = await GET(request("GET", "/api/people?search=%25", { cookie }), at());
    expect(await response.json()).toEqual({ items: [], nextCursor: null });
    expect(await (await GET(request("GET", "/api/people", { cookie }), at())).text()).not.toMatch(/argon2|passwordHash/);
  });

  test.each(["x", "bnVsbA", "W10"])("the cursor %s is 400", async (cursor) => {
    const { cookie } = await signedInAs("administrator");
    expect((await GET(request("GET", `/api/people?cursor=${cursor}`, { cookie }), at())).status).toBe(400);
  });
});

test("an address is taken once, in whatever case", async () => {
  const { cookie } = await signedInAs("administrator");
  const make = (email: string) => POST(request("POST", "/api/people", { cookie, body: { email, name: "N", role: "viewer", password: "long enough indeed" } }), at());
  expect((await make("Twice@longreed.example")).status).toBe(201);
  expect((await make(" twice@LONGREED.example")).status).toBe(409);
});
