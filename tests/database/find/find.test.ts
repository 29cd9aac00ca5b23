import { afterAll, beforeAll, expect, test, vi } from "vitest";
import { GET } from "@/app/api/find/route";
import { sequelize } from "@/lib/db";
import { find } from "@/lib/find/find";
import type { Actor } from "@/lib/people/actor";
import { ROLES } from "@/lib/permissions";
import { buildCampaign } from "../../factories/campaign";
import { buildLiquid } from "../../factories/liquid";
import { buildLot } from "../../factories/lot";
import { buildMount } from "../../factories/mount";
import { now } from "../../factories/now";
import { actor } from "../../factories/person";
import { buildProtocol } from "../../factories/protocol";
import { buildRig } from "../../factories/rig";
import { buildSensor } from "../../factories/sensor";
import { at, request, signedInAs } from "../../factories/session";

afterAll(() => sequelize.close());

let by: Actor;
beforeAll(async () => {
  by = await actor("viewer");
});

const names = async (q: string, limit = 10) => (await find({ by, q, limit })).items.map(({ kind, name }) => `${kind} ${name}`);

test("a campaign is found by its number, before anything that only holds the digits", async () => {
  const campaign = await buildCampaign({ name: "Slow ageing in brine" });
  await buildSensor({ serial: `X-${campaign.id}-C` });
  for (const q of [`C-${campaign.id}`, `c-${campaign.id}`, campaign.id]) {
    const { items } = await find({ by, q, limit: 10 });
    expect(items[0], q).toMatchObject({ kind: "campaign", id: campaign.id, name: "Slow ageing in brine", href: `/campaigns/C-${campaign.id}` });
  }
});

test("the same word comes before beginnings, beginnings before middles", async () => {
  await buildSensor({ serial: "AX-TARN-9" });
  await buildSensor({ serial: "TARN-9-B" });
  await buildSensor({ serial: "TARN-9" });
  expect(await names("tarn-9")).toEqual(["sensor TARN-9", "sensor TARN-9-B", "sensor AX-TARN-9"]);
});

test("every word must occur, in any order and in what belongs to the thing", async () => {
  const sensor = await buildSensor({ serial: "WQ-77" });
  const rig = await buildRig({ name: "Gallery bench" });
  await buildMount({ sensorId: sensor.id, rigId: rig.id });
  await buildCampaign({ name: "Winter run", sensorId: sensor.id, rigId: rig.id });
  expect(await names("gallery winter")).toEqual(["campaign Winter run"]);
  expect(await names("winter nowhere")).toEqual([]);
});

test("liquids, lots, rigs and protocols are found, a lot by its code with the address of its liquid", async () => {
  const liquid = await buildLiquid({ name: "Quillwater" });
  await buildLot({ liquidId: liquid.id, code: "QW-5512" });
  await buildRig({ name: "Quillwater rig" });
  await buildProtocol({ name: "Quillwater weekly" });
  expect(new Set(await names("quillwater"))).toEqual(new Set(["liquid Quillwater", "lot Quillwater QW-5512", "rig Quillwater rig", "protocol Quillwater weekly"]));
  expect((await find({ by, q: "qw-5512", limit: 5 })).items[0]).toMatchObject({ kind: "lot", href: `/liquids/${liquid.id}` });
});

test("many of one kind do not hide another, and are counted", async () => {
  await buildSensor({ serial: "HAZEL-1" });
  const sensor = await buildSensor();
  for (let i = 0; i < 4; i++) await buildCampaign({ name: `Hazel ${i}`, sensorId: sensor.id });
  const { items, totals } = await find({ by, q: "hazel", limit: 2 });
  expect(items.map(({ kind }) => kind).toSorted()).toEqual(["campaign", "campaign", "sensor"]);
  expect(totals).toEqual({ campaign: 4, sensor: 1 });
});

test("a held campaign says its word, a retired sensor says so and comes last", async () => {
  await buildCampaign({ name: "Osier run", state: "held" });
  await buildSensor({ serial: "OSIER-1", retiredAt: now });
  await buildSensor({ serial: "OSIER-2" });
  const { items } = await find({ by, q: "osier", limit: 5 });
  expect(items.map(({ name, note }) => [name, note.split(", ").at(-1)])).toEqual([["Osier run", "Paused"], ["OSIER-2", "wire"], ["OSIER-1", "retired"]]);
});

test.each(["%", "_", "\\", "'; drop table person; --", "a ".repeat(50), "\u202eabc", "({[", "a\u0000b", "\ud800"])("the words %j are words, nothing else", async (q) => {
  await expect(find({ by, q, limit: 5 })).resolves.toMatchObject({ items: expect.any(Array) });
});

test("a percent sign finds only what holds one", async () => {
  await buildProtocol({ name: "Glycerol at 40 % for a week" });
  expect(await names("%")).toEqual(["protocol Glycerol at 40 % for a week"]);
});

test("people are never found", async () => {
  const { name } = await actor("researcher");
  expect(await names(name)).toEqual([]);
});

test("one query, whatever is found", async () => {
  const query = vi.spyOn(sequelize, "query");
  await find({ by, q: "a", limit: 50 });
  expect(query).toHaveBeenCalledTimes(1);
  query.mockRestore();
});

test.each(ROLES)("a %s may find; nobody signed in may not; no words are refused", async (role) => {
  const { cookie } = await signedInAs(role);
  expect((await GET(request("GET", "/api/find?q=osier", { cookie }), at())).status).toBe(200);
  expect((await GET(request("GET", "/api/find?q=osier"), at())).status).toBe(401);
  expect((await GET(request("GET", "/api/find?q=%20", { cookie }), at())).status).toBe(400);
  expect((await GET(request("GET", "/api/find", { cookie }), at())).status).toBe(400);
});
