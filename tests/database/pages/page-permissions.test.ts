import fs from "node:fs";
import path from "node:path";
import { isValidElement, type ReactNode } from "react";
import { afterAll, beforeAll, describe, expect, test, vi } from "vitest";
import { NotAllowed } from "@/app/(app)/not-allowed";
import { Empty } from "@/components/ui/states";
import { sequelize } from "@/lib/db";
import { sessionCookieName } from "@/lib/people/session-cookie";
import { may, PAGES, ROLES, whoMay, type Permission, type Role } from "@/lib/permissions";
import { Invitation } from "@/models/invitation";
import { newToken } from "@/lib/tokens";
import { buildCampaign } from "@/tests/factories/campaign";
import { openAlarm } from "@/lib/alarms/open-alarm";
import { inTransaction, row } from "@/lib/db";
import { Bench } from "@/tests/factories/bench";
import { buildImportRun } from "@/tests/factories/import-run";
import { buildLot } from "@/tests/factories/lot";
import { now } from "@/tests/factories/now";
import { buildPerson } from "@/tests/factories/person";
import { buildProtocolVersion } from "@/tests/factories/protocol";
import { buildRig } from "@/tests/factories/rig";
import { buildSensor } from "@/tests/factories/sensor";
import { agentToken, signedInAs } from "@/tests/factories/session";

/** What Next.js gives a page of the request that it answers. */
const incoming = vi.hoisted(() => ({ cookie: undefined as string | undefined, authorization: undefined as string | undefined }));
vi.mock("server-only", () => ({}));
vi.mock("next/headers", () => ({
  cookies: async () => ({ get: (name: string) => (incoming.cookie?.startsWith(`${name}=`) ? { name, value: incoming.cookie.slice(name.length + 1) } : undefined) }),
  headers: async () => new Headers(incoming.authorization ? { authorization: incoming.authorization } : {}),
}));

type Page = { default: (props: { params: Promise<Record<string, string>>; searchParams: Promise<Record<string, string>> }) => ReactNode | Promise<ReactNode> };
type Address = keyof typeof PAGES;

const modules = import.meta.glob<Page>("/app/**/page.tsx");
const addressOf = (file: string) => `/${path.posix.dirname(file).split("/").slice(2).filter((part) => !part.startsWith("(")).join("/")}`;
const pages = new Map(Object.entries(modules).map(([file, load]) => [addressOf(file), load]));

const cookies = {} as Record<Role, string>;
const parts: Partial<Record<Address, Record<string, string>>> = {};

beforeAll(async () => {
  for (const role of ROLES) cookies[role] = (await signedInAs(role)).cookie;
  const rig = await buildRig();
  const lot = await buildLot();
  const { id: campaignId } = await buildCampaign({ state: "running", rigId: rig.id });
  const { alarmId } = await inTransaction((transaction) => openAlarm(transaction, { now, rigId: rig.id, source: "system", kind: "clock", text: "The clock is off", actionText: "Measuring goes on.", mail: false }));
  const { token, hash } = newToken("invitation");
  await Invitation.create({ email: "guest@longreed.example", name: "R. Askelund", role: "viewer", tokenHash: hash, invitedBy: (await buildPerson()).id, createdAt: new Date(), expiresAt: new Date(Date.now() + 1e9) });
  const protocol = { id: (await buildProtocolVersion()).protocolId };
  const sensor = { id: (await buildSensor()).id };
  const liquid = { id: lot.liquidId, lotId: lot.id };
  const bench = await Bench.make();
  await bench.hello();
  for (let step = await bench.next(); step; step = await bench.next()) {
    await bench.carryOut(step);
    if (step.kind === "measure") break;
  }
  const measured = await row<{ sequence: number }>(`select sequence from step where campaign_id = $1 and stored > 0 limit 1`, [bench.campaign.id]);
  const reading = { id: `C-${bench.campaign.id}`, sequence: String(measured?.sequence), index: "0" };
  Object.assign(parts, {
    "/alarms/[id]": { id: alarmId },
    "/api-reference/[group]": { group: "rigs" },
    "/campaigns/[id]": { id: `C-${campaignId}` },
    "/campaigns/[id]/fits": { id: `C-${campaignId}` },
    "/campaigns/[id]/readings/[sequence]/[index]": reading,
    "/campaigns/[id]/stability": { id: `C-${campaignId}` },
    "/import/[id]": { id: (await buildImportRun()).id },
    "/invitation/[token]": { token },
    "/liquids/[id]": liquid,
    "/liquids/[id]/edit": liquid,
    "/liquids/[id]/lots/[lotId]/edit": liquid,
    "/liquids/[id]/lots/new": liquid,
    "/new-password/[token]": { token: "any" },
    "/problems/[code]": { code: "invalid" },
    "/protocols/[id]": protocol,
    "/protocols/[id]/edit": protocol,
    "/rigs/[id]": { id: rig.id },
    "/rigs/[id]/edit": { id: rig.id },
    "/sensors/[id]": sensor,
    "/sensors/[id]/edit": sensor,
  } satisfies typeof parts);
});
afterAll(() => sequelize.close());

/** What the page answers to whoever sends that cookie or that Authorization. */
async function open(address: Address, by: { cookie?: string; authorization?: string }): Promise<ReactNode> {
  incoming.cookie = by.cookie;
  incoming.authorization = by.authorization;
  const page = (await pages.get(address)?.()) as Page;
  return page.default({ params: Promise.resolve(parts[address] ?? {}), searchParams: Promise.resolve({}) });
}

/** Every element in what a page answered, components not yet unfolded. */
function* elementsIn(node: unknown): Generator<{ type: unknown; props: Record<string, unknown> }> {
  if (Array.isArray(node)) for (const one of node) yield* elementsIn(one);
  if (!isValidElement<Record<string, unknown>>(node)) return;
  yield node;
  for (const value of Object.values(node.props)) yield* elementsIn(value);
}

/** Whether the page says that it is for others. */
function turnsAway(node: ReactNode, permission: Permission): boolean {
  return [...elementsIn(node)].some(({ type, props }) => {
    if (type === NotAllowed) return props.permission === permission;
    return type === Empty && [props.children].flat().join("").includes(whoMay(permission));
  });
}

const addresses = Object.keys(PAGES) as Address[];
const forPeople = addresses.filter((address) => PAGES[address] !== "public");

test("every page stands in the table of permissions, and the table names no other", () => {
  expect(addresses.toSorted()).toEqual([...pages.keys()].toSorted());
});

test("there is no server action beside the API: one would need its place in the table", () => {
  const root = path.resolve(import.meta.dirname, "../../..");
  const sources = ["app", "components", "lib"].flatMap((folder) => fs.readdirSync(path.join(root, folder), { recursive: true, encoding: "utf8" }).filter((file) => /\.tsx?$/.test(file)).map((file) => path.join(root, folder, file)));
  expect(sources.filter((file) => /["']use server["']/.test(fs.readFileSync(file, "utf8")))).toEqual([]);
});

describe.each(forPeople)("%s", (address) => {
  const permission = PAGES[address] as Permission;

  test.each(ROLES)("a %s sees what the table says", async (role) => {
    const answer = await open(address, { cookie: cookies[role] });
    expect(turnsAway(answer, permission)).toBe(!may(role, permission));
  });

  test("nobody, a foreign agent and a person's token are sent to sign in", async () => {
    const administrator = cookies.administrator;
    const nobody = [{}, { authorization: `Bearer ${(await agentToken()).token}` }, { cookie: `${sessionCookieName()}=` }, { cookie: `${administrator.slice(0, -6)}AAAAAA` }];
    for (const by of nobody) await expect(open(address, by)).rejects.toMatchObject({ digest: expect.stringMatching(/^NEXT_REDIRECT;[^;]*;\/sign-in/) });
  });
});

test.each(addresses.filter((address) => PAGES[address] === "public"))("%s is open to nobody in particular", async (address) => {
  await expect(open(address, {})).resolves.toBeDefined();
});
