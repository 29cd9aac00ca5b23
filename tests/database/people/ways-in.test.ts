import { afterAll, describe, expect, test } from "vitest";
import { POST as accept } from "@/app/api/invitations/accept/route";
import { POST as inviteByHttp } from "@/app/api/invitations/route";
import { POST as changePasswordByHttp } from "@/app/api/me/password/route";
import { GET as me } from "@/app/api/me/route";
import { POST as makeToken } from "@/app/api/tokens/route";
import { row, rows, sequelize } from "@/lib/db";
import { acceptInvitation, readInvitation } from "@/lib/people/accept-invitation";
import { findInvitations, invite, withdrawInvitation } from "@/lib/people/invitations";
import { hashPassword } from "@/lib/people/password";
import { askForReset, resetPassword } from "@/lib/people/password-reset";
import { signIn } from "@/lib/people/sign-in";
import { findTokens, withdrawToken } from "@/lib/people/tokens";
import { hashToken } from "@/lib/tokens";
import { DAY_MS, next, now } from "../../factories/now";
import { actor, buildPerson } from "../../factories/person";
import { at, cookieOf, request, signedInAs, tokenOf } from "../../factories/session";

afterAll(() => sequelize.close());

const password = "long enough indeed";
const somebody = async () => buildPerson({ passwordHash: await hashPassword(password) });
const tokenOfLink = (link: string) => link.split("/").at(-1) ?? "";
const later = (ms: number) => new Date(now.getTime() + ms);

describe("signing in", () => {
  test("needs the right password of an open account, in whatever case the address is typed", async () => {
    const person = await somebody();
    const closed = await buildPerson({ passwordHash: person.passwordHash, closedAt: now });
    const enter = (email: string, given: string) => signIn({ email, password: given, place: `place ${next()}`, now });
    expect(await enter(` ${person.email.toUpperCase()}`, password)).toMatchObject({ id: person.id, sessionVersion: 1 });
    expect(await enter(person.email, `${password} `)).toBeUndefined();
    expect(await enter(closed.email, password)).toBeUndefined();
    expect(await enter("nobody@longreed.example", password)).toBeUndefined();
    expect(await enter("a\0b@longreed.example", password)).toBeUndefined();
    expect(await enter((await buildPerson()).email, "")).toBeUndefined();
  });

  test("ten failures from one place close the account to it for 15 minutes, even with the right password; not elsewhere", async () => {
    const person = await somebody();
    const enter = (given: string, place: string) => signIn({ email: person.email, password: given, place, now });
    for (let i = 0; i < 10; i++) expect(await enter("wrong", "one place")).toBeUndefined();
    await expect(enter(password, "one place")).rejects.toMatchObject({ status: 429, retryAfterS: expect.closeTo(900, -1) });
    expect(await enter(password, "another place")).toBeDefined();
  });

  test("successes are not counted against anybody", async () => {
    const person = await somebody();
    for (let i = 0; i < 12; i++) expect(await signIn({ email: person.email, password, place: "a busy place", now })).toBeDefined();
  });

  test("an unknown address costs the same hash as a known one", async () => {
    const person = await somebody();
    // Processor time, all threads: a busy machine stretches the clock, not this. A look-up alone takes a fiftieth of a hash.
    const cost = async (email: string) => {
      const before = process.cpuUsage();
      await signIn({ email, password: "wrong", place: `place ${next()}`, now });
      const { user, system } = process.cpuUsage(before);
      return user + system;
    };
    const least = async (email: (i: number) => string) => Math.min(...(await [0, 1, 2, 3, 4].reduce<Promise<number[]>>(async (costs, i) => [...(await costs), await cost(email(i))], Promise.resolve([]))));
    await cost("warm-up@longreed.example");
    const known = await least(() => person.email);
    expect(await least((i) => `n${i}@longreed.example`)).toBeGreaterThan(known / 3);
  });
});

describe("invitations", () => {
  const asked = () => ({ email: `guest-${next()}@longreed.example`, name: "A Guest", role: "operator" as const });

  test("lead from the mail to an account of that role, once", async () => {
    const by = await actor("administrator");
    const given = asked();
    const { id, link } = await invite({ by, now, ...given });
    const letter = await row<{ address: string; text: string; html: string }>("select address, body_text as text, body_html as html from notification where kind = $1", [`invitation:${id}`]);
    expect(letter).toMatchObject({ address: given.email, text: expect.stringContaining(link), html: expect.stringContaining(link) });

    const token = tokenOfLink(link);
    expect(await readInvitation({ now, token })).toEqual(given);
    const person = await acceptInvitation({ now, token, name: "G. Uest", password });
    expect(person).toMatchObject({ email: given.email, role: "operator", name: "G. Uest" });
    expect(await signIn({ email: given.email, password, place: "p", now })).toMatchObject({ id: person.id });
    await expect(acceptInvitation({ now, token, name: "Again", password })).rejects.toMatchObject({ status: 410 });
  });

  test("hold seven days, on each side of the cut-off, and end when withdrawn or replaced", async () => {
    const by = await actor("administrator");
    const given = asked();
    const first = tokenOfLink((await invite({ by, now, ...given })).link);
    expect(await readInvitation({ now: later(7 * DAY_MS - 1), token: first })).toMatchObject({ email: given.email });
    await expect(readInvitation({ now: later(7 * DAY_MS), token: first })).rejects.toMatchObject({ status: 410 });

    const second = await invite({ by, now, ...given });
    await expect(readInvitation({ now, token: first })).rejects.toMatchObject({ status: 410 });
    await withdrawInvitation({ by, now, invitationId: second.id });
    await expect(acceptInvitation({ now, token: tokenOfLink(second.link), name: "N", password })).rejects.toMatchObject({ status: 410 });
    const { items } = await findInvitations({ by, now, limit: 2 });
    expect(items.map(({ state }) => state)).toEqual(["withdrawn", "withdrawn"]);
  });

  test("an unknown link is 404, a weak password 400, and the link stays good", async () => {
    const send = (token: string, given: string) => accept(request("POST", "/api/invitations/accept", { body: { token, name: "N", password: given } }), at());
    expect((await send("lr_invitation_unknown", password)).status).toBe(404);
    const { cookie } = await signedInAs("administrator");
    const { link } = (await (await inviteByHttp(request("POST", "/api/invitations", { cookie, body: asked() }), at())).json()) as { link: string };
    expect((await send(tokenOfLink(link), "short")).status).toBe(400);
    expect((await send(tokenOfLink(link), "longreed-demo")).status).toBe(400);
    expect((await send(tokenOfLink(link), password)).status).toBe(201);
  });

  test("what a name holds is text in the letter, not markup", async () => {
    const by = { ...(await actor("administrator")), name: '<img src="x">' };
    const { id } = await invite({ by, now, ...asked() });
    const letter = await row<{ html: string }>("select body_html as html from notification where kind = $1", [`invitation:${id}`]);
    expect(letter?.html).not.toContain("<img");
  });
});

describe("passwords", () => {
  test("a reset link works once within the hour and ends every session", async () => {
    const person = await somebody();
    const cookie = await cookieOf({ id: person.id, sessionVersion: 1 });
    const ask = async () => {
      await askForReset({ email: person.email, place: "p", now });
      const letter = await row<{ text: string }>("select body_text as text from notification where person_id = $1 order by id desc limit 1", [person.id]);
      return /new-password\/(\S+)/.exec(letter?.text ?? "")?.[1] ?? "";
    };
    const token = await ask();
    await expect(resetPassword({ token, password: "another long one", now: later(3_600_000) })).rejects.toMatchObject({ status: 410 });
    await resetPassword({ token, password: "another long one", now: later(3_599_999) });
    await expect(resetPassword({ token, password: "a third long one", now })).rejects.toMatchObject({ status: 410 });
    expect((await me(request("GET", "/api/me", { cookie }), at())).status).toBe(401);
    expect(await signIn({ email: person.email, password: "another long one", place: "p", now })).toBeDefined();
  });

  test("asking for an unknown address writes nothing and says nothing", async () => {
    const before = await rows("select id from notification");
    await askForReset({ email: "nobody@longreed.example", place: "p", now });
    expect(await rows("select id from notification")).toHaveLength(before.length);
  });

  test("are changed with the present one, by a person and not by a token; all sessions end", async () => {
    const person = await somebody();
    const cookie = await cookieOf({ id: person.id, sessionVersion: 1 });
    const change = async (given: { cookie?: string; token?: string }, current: string) =>
      (await changePasswordByHttp(request("POST", "/api/me/password", { ...given, body: { current, password: "another long one" } }), at())).status;
    expect(await change({ cookie }, "wrong")).toBe(400);
    expect(await change({ token: await tokenOf(person.id) }, password)).toBe(403);
    expect(await change({ cookie }, password)).toBe(204);
    expect(await change({ cookie }, password)).toBe(401);
  });
});

describe("personal access tokens", () => {
  test("are shown once, kept as a hash, and make no others", async () => {
    const { person, cookie } = await signedInAs("viewer");
    const made = await makeToken(request("POST", "/api/tokens", { cookie, body: { name: "plots", scope: "write" } }), at());
    const { id, token } = (await made.json()) as { id: string; token: string };
    expect([made.status, token]).toEqual([201, expect.stringMatching(/^lr_person_[\w-]{43}$/)]);
    const stored = await row<{ hash: Buffer }>("select token_hash as hash from access_token where id = $1", [id]);
    expect(stored?.hash.equals(hashToken(token))).toBe(true);
    expect((await makeToken(request("POST", "/api/tokens", { token, body: { name: "more" } }), at())).status).toBe(403);

    const { items } = await findTokens({ by: { id: person.id, name: person.name, role: "viewer" }, limit: 10 });
    expect(items).toEqual([expect.objectContaining({ id, last4: token.slice(-4), scope: "write", withdrawnAt: null })]);
    expect(JSON.stringify(items)).not.toContain(token);
  });

  test("are withdrawn by their person or an administrator; for others they do not exist", async () => {
    const person = await actor("researcher");
    const token = await tokenOf(person.id);
    const found = await row<{ id: string }>("select id from access_token where token_hash = $1", [hashToken(token)]);
    const tokenId = found?.id ?? "";
    await expect(withdrawToken({ by: await actor("researcher"), now, tokenId })).rejects.toMatchObject({ status: 404 });
    await withdrawToken({ by: await actor("administrator"), now, tokenId });
    expect((await me(request("GET", "/api/me", { token }), at())).status).toBe(401);
  });
});
